#!/bin/sh
# Builds passfet, imports the demo ratings into a fresh database and ranks them for the demo line card.
#
#   sh data/demo.sh
#
# Installs the Debian packages that it needs where it may; else it names them and stops.
set -eu
cd "$(dirname "$0")/.."
. data/packages.sh

# Runs a command quietly; what it said is shown only when it fails.
quietly() {
    "$@" >build/demo.log 2>&1 || {
        cat build/demo.log >&2
        return 1
    }
}

# The list is split on purpose.
# shellcheck disable=SC2086
need_packages $BUILD_NEEDS

echo "Building build/passfet ..."
mkdir -p build
quietly cmake -S . -B build -DCMAKE_BUILD_TYPE=Release -DPF_TESTS=OFF -DPF_WERROR=OFF
quietly cmake --build build --parallel "$(processors)"

rm -f build/demo.db build/demo.db-journal
build/passfet --db build/demo.db import --by demo --why "demo ratings" \
    data/demo/parts.csv data/demo/soa_points.csv data/demo/zth_points.csv data/demo/foster.csv
echo
build/passfet --db build/demo.db rank data/demo/line_card_48v.csv
