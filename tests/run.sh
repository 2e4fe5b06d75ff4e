#!/bin/sh
# Builds and runs every test, then the C tests once more with address and undefined-behaviour checks.
#
#   sh tests/run.sh
#
# Installs the Debian packages that it needs where it may; else it names them and stops. Builds in
# build-tests/ and build-sanitize/.
set -eu
cd "$(dirname "$0")/.."
. data/packages.sh

TEST_NEEDS='header:cmocka.h:libcmocka-dev library:gsl:libgsl-dev command:python3:python3
command:jq:jq command:sqlite3:sqlite3 command:man:man-db'

# run_tests FOLDER CTEST_ARGUMENTS -- CMAKE_ARGUMENTS: one build and its tests.
run_tests() {
    folder=$1 chosen=$2
    shift 2
    echo "== $folder"
    cmake -S . -B "$folder" "$@"
    cmake --build "$folder" --parallel "$(processors)"
    # chosen holds options with their values, or nothing
    # shellcheck disable=SC2086
    ctest --test-dir "$folder" --output-on-failure --parallel "$(processors)" $chosen
}

# The lists are split on purpose.
# shellcheck disable=SC2086
need_packages $BUILD_NEEDS $TEST_NEEDS

export ASAN_OPTIONS=detect_stack_use_after_return=1
run_tests build-tests '' -DCMAKE_BUILD_TYPE=Release
# Warnings do not stop this one: with sanitizers gcc sees paths that are none.
run_tests build-sanitize '--label-exclude plain_only --exclude-regex fuzz_' -DCMAKE_BUILD_TYPE=Debug \
    -DCMAKE_C_FLAGS=-O1 -DPF_SANITIZE=address,undefined -DPF_WERROR=OFF
