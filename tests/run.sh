#!/usr/bin/env bash
# SPDX-License-Identifier: MIT
# Builds headband and its tests and runs everything but the label `slow`; installs what is missing (Debian 12).
#   tests/run.sh          the everyday set
#   tests/run.sh --all    also: slow tests, clang 19, address and thread sanitizers, audit, clang-tidy, clang-format,
#                         coverage, valgrind, fuzz smoke; ends with a table
set -euo pipefail
tests=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
root=$(dirname "$tests")
jobs=${HEADBAND_JOBS:-$(nproc)}
all=0
case "${1:-}" in
  "") ;;
  --all) all=1 ;;
  *) echo "usage: tests/run.sh [--all]" >&2; exit 64 ;;
esac

"$tests/setup.sh" test

# configure KIND [more cmake options]: build/KIND, made once, refreshed by ninja itself afterwards
configure() {
  local kind=$1
  shift
  if [[ ! -f $root/build/$kind/build.ninja ]] || (($#)); then
    cmake -S "$root" -B "$root/build/$kind" -G Ninja -C "$tests/kinds/$kind.cmake" "$@" >"$root/build/$kind.log" 2>&1 ||
      { cat "$root/build/$kind.log"; return 1; }
  fi
}
mkdir -p "$root/build"

configure release -DHEADBAND_DEVELOPER_MODE=ON -DHEADBAND_WERROR=ON
ninja -C "$root/build/release" -j "$jobs"
if ((!all)); then
  exec ctest --test-dir "$root/build/release" -LE slow --parallel "$jobs" --output-on-failure --timeout 300 --no-tests=error
fi

# --all: each step on its own, all of them run, a table at the end.
table=()
failed=0
step() {
  local name=$1 start=$SECONDS
  shift
  echo "=== $name"
  if "$@"; then table+=("ok      $name  $((SECONDS - start)) s"); else
    table+=("FAILED  $name  $((SECONDS - start)) s")
    failed=1
  fi
}
test_kind() {  # KIND [ctest options]
  local kind=$1
  shift
  ninja -C "$root/build/$kind" -j "$jobs" >"$root/build/$kind-build.log" 2>&1 || { tail -n 40 "$root/build/$kind-build.log"; return 1; }
  ctest --test-dir "$root/build/$kind" --parallel "$jobs" --output-on-failure --timeout 1800 --no-tests=error "$@"
}
kind() {
  local kind=$1
  shift
  configure "$kind" && test_kind "$kind" "$@"
}
clang() {
  mkdir -p "$root/build"
  cmake -S "$root" -B "$root/build/clang" -G Ninja -C "$tests/kinds/release.cmake" -DHEADBAND_DEVELOPER_MODE=ON \
    -DHEADBAND_WERROR=ON -DCMAKE_C_COMPILER=clang-19 -DCMAKE_CXX_COMPILER=clang++-19 >"$root/build/clang.log" 2>&1 &&
    test_kind clang -LE slow
}
tidy() {  # the sources of the house, tests not; nothing is built but what is generated
  configure tidy && ninja -C "$root/build/tidy" headband_build_record headband_report_assets >/dev/null &&
    git -C "$root" ls-files -z 'core/*.cpp' 'transient/*.cpp' 'montecarlo/*.cpp' |
    (cd "$root" && xargs -0 -n 1 -P "$jobs" clang-tidy-19 --quiet -p build/tidy >build/tidy-findings.log 2>/dev/null) ||
    { grep -E "(warning|error):" "$root/build/tidy-findings.log" | sort -u | head -n 40; return 1; }
}
format() { git -C "$root" ls-files -z '*.hpp' '*.cpp' | (cd "$root" && xargs -0 clang-format-19 --dry-run --Werror); }
coverage() {
  configure coverage && test_kind coverage -LE 'slow|cli|page' &&
    gcovr -r "$root" --gcov-ignore-parse-errors -e "$root/tests" -e "$root/build" -s "$root/build/coverage" | tail -n 6
}
memory() {  # valgrind on the tests that read what users write
  valgrind --quiet --error-exitcode=9 --leak-check=full "$root/build/dev/tests/test_reading" --gtest_brief=1
}
dev_build() { configure dev && ninja -C "$root/build/dev" -j "$jobs" test_reading >/dev/null; }

step "release, everything" test_kind release
step "clang 19, everyday set" clang
step "audit (assertions in release)" kind audit -LE 'slow|page'
step "addresses and undefined behaviour" kind asan -LE 'slow|page|limits'
step "thread sanitizer" kind tsan -L unit
step "clang-tidy 19" tidy
step "clang-format 19" format
step "coverage" coverage
step "debug build" dev_build
step "valgrind" memory
step "fuzz smoke" "$tests/fuzz/smoke.sh"
printf '\n%s\n' "${table[@]}"
exit $failed
