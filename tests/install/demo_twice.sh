#!/bin/sh
# The demo of a fresh copy ends with the same shortlist each time that it is run, from any folder.
#
#   demo_twice.sh SOURCE_FOLDER
set -eu
source=$1
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

mkdir "$work/passfet"
for name in CMakeLists.txt src include schema data docs README.md; do
    cp -R "$source/$name" "$work/passfet/$name"
done

cd /
for run in 1 2; do
    sh "$work/passfet/data/demo.sh" >"$work/all" 2>"$work/err" || { cat "$work/all" "$work/err"; exit 1; }
    # From the card's head on; the state of the database bears the time of its import.
    sed -n '/^Card /,$p' "$work/all" | sed 's/revision [0-9a-f-]*//' >"$work/$run"
    grep -q "^44 parts: [1-9]" "$work/$run"
done
cmp "$work/1" "$work/2"
