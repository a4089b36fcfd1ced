#!/usr/bin/env bash
# Installs what is missing, builds tincture with both compilers and runs every test. Says how long each stage
# took; ends with the closing line of the test runner over all suites.
#   scripts/test.sh
set -euo pipefail
cd "$(dirname "$0")/.."

stages=()
stage() {
    local name=$1 start=$SECONDS
    shift
    echo "== $name"
    "$@"
    stages+=("$(printf '%5d s  %s' $((SECONDS - start)) "$name")")
}
build() {
    cmake --preset "$1" -DTINCTURE_TESTS=ON >/dev/null
    cmake --build --preset "$1" -- --quiet
}
run_tests() {
    ctest --preset "$1" -j "$(nproc)" | tee "build/$1/tests.log"
}
check_format() {
    find src tests sample-images -name '*.cpp' -o -name '*.h' | xargs clang-format-14 --dry-run --Werror
}

stage "Debian packages" scripts/install-packages.sh test
stage "formatting" check_format
stage "build with g++, release" build release
stage "build with clang 14, AddressSanitizer and UndefinedBehaviorSanitizer" build dev
stage "tests under the sanitizers" run_tests dev
stage "tests, release" run_tests release

echo
echo "Time taken:"
printf '%s\n' "${stages[@]}"
echo
grep 'tests passed' build/release/tests.log
