# packages.sh: finds out which of the things that a script needs are missing, and installs them where
# it may. Sourced by data/demo.sh and tests/run.sh.
#
#   need_packages KIND:THING:PACKAGE...
#
# KIND is `command`, `library` (by pkg-config) or `header`; PACKAGE is Debian's name for what holds it.

# Whether one KIND:THING:PACKAGE is there.
has() {
    thing=${1#*:}
    thing=${thing%%:*}
    case $1 in
    command:*) command -v "$thing" >/dev/null 2>&1 ;;
    library:*) pkg-config --exists "$thing" 2>/dev/null ;;
    header:*) echo "#include <$thing>" | cc -E -x c - >/dev/null 2>&1 ;;
    esac
}

# The packages of what is missing.
missing_packages() {
    for want in "$@"; do
        has "$want" || printf ' %s' "${want##*:}"
    done
}

need_packages() {
    missing=$(missing_packages "$@")
    [ -n "$missing" ] || return 0
    as_root=
    if [ "$(id -u)" != 0 ]; then as_root='sudo -n'; fi
    if ! command -v apt-get >/dev/null || { [ -n "$as_root" ] && ! sudo -n true 2>/dev/null; }; then
        echo "Missing, and not to be installed from here. The packages (Debian's names):$missing" >&2
        return 1
    fi
    echo "Installing:$missing"
    # Package names hold no blanks; the list is split on purpose.
    # shellcheck disable=SC2086
    { $as_root apt-get update -qq || true; } &&
        $as_root env DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends $missing
    missing=$(missing_packages "$@")
    [ -z "$missing" ] || {
        echo "Still missing after the installation:$missing" >&2
        return 1
    }
}

# What building passfet itself takes.
BUILD_NEEDS='command:cc:gcc header:stdio.h:libc6-dev command:make:make command:cmake:cmake
command:pkg-config:pkg-config library:sqlite3:libsqlite3-dev library:libmd:libmd-dev
header:csv.h:libcsv-dev'

# Processors to build and test with.
processors() {
    nproc 2>/dev/null || echo 1
}
