#!/bin/sh
# Installs a build under an empty folder and builds two projects on it: by pkg-config, by find_package.
#
#   run.sh BUILD_FOLDER THIS_FOLDER
set -eu
build=$1 here=$2
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

cmake --install "$build" --prefix "$work/usr" >"$work/log" || { cat "$work/log"; exit 1; }
prefix=$work/usr
pc=$(find "$prefix" -name passfet.pc)
PKG_CONFIG_PATH=$(dirname "$pc")
export PKG_CONFIG_PATH

echo "the command runs, and its manual is there"
"$prefix/bin/passfet" --version
test -f "$prefix/share/man/man1/passfet.1"
test -f "$prefix/share/doc/passfet/docs/methods.md"

echo "every public header can be included alone"
for header in "$prefix"/include/passfet/*.h; do
    printf '#include <passfet/%s>\nint main(void) { return 0; }\n' "${header##*/}" >"$work/alone.c"
    cc -std=c17 -Wall -Wextra -Wpedantic -Werror $(pkg-config --cflags passfet) -c "$work/alone.c" -o "$work/alone.o"
done

echo "a project builds by pkg-config"
cc -std=c17 $(pkg-config --cflags passfet) "$here/consumer.c" $(pkg-config --libs passfet) -o "$work/by_pkg_config"
"$work/by_pkg_config"

echo "a project builds by find_package"
cmake -S "$here" -B "$work/project" -DCMAKE_PREFIX_PATH="$prefix" >"$work/log" 2>&1 &&
    cmake --build "$work/project" >>"$work/log" 2>&1 || { cat "$work/log"; exit 1; }
"$work/project/consumer"
