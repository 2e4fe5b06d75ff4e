#!/bin/sh
# Builds the fuzz targets with clang and runs each for some seconds on its corpus.
#
#   run.sh BUILD_FOLDER SECONDS_PER_TARGET
#
# What is found stays in BUILD_FOLDER/found; inputs that reach new code in BUILD_FOLDER/corpus. Exit
# status 77: no clang with a fuzzer here.
set -eu
build=$1
seconds=$2
here=$(cd "$(dirname "$0")" && pwd)
clang=$(command -v clang-14 || command -v clang || true)
if [ -z "$clang" ]; then
    echo "fuzzing passed over: no clang"
    exit 77
fi
mkdir -p "$build/found"
if ! printf 'int LLVMFuzzerTestOneInput(const char *d, long n);int LLVMFuzzerTestOneInput(const char *d, long n){return d[0]&&n?0:0;}' |
    "$clang" -x c - -fsanitize=fuzzer -o "$build/probe" 2>/dev/null; then
    echo "fuzzing passed over: this clang has no libFuzzer"
    exit 77
fi
cmake -S "$here/../.." -B "$build" -DCMAKE_C_COMPILER="$clang" -DCMAKE_BUILD_TYPE=RelWithDebInfo \
    -DPF_FUZZ=ON -DPF_WERROR=OFF -DPF_SANITIZE=address,undefined >/dev/null
cmake --build "$build" --target fuzz_targets >"$build/build.log" 2>&1 || {
    tail -n 30 "$build/build.log"
    exit 1
}
for target in table number cell profile ratings; do
    mkdir -p "$build/corpus/$target"
    echo "fuzz_$target for $seconds s"
    "$build/tests/fuzz_$target" -max_total_time="$seconds" -timeout=10 -rss_limit_mb=1024 -print_final_stats=1 \
        -max_len=4096 -artifact_prefix="$build/found/$target-" "$build/corpus/$target" \
        "$here/corpus/$target" >"$build/fuzz_$target.log" 2>&1 || {
        tail -n 40 "$build/fuzz_$target.log"
        exit 1
    }
    grep -E "number_of_executed_units|DONE" "$build/fuzz_$target.log" || true
done
