#!/usr/bin/env bash
# SPDX-License-Identifier: MIT
# A short run of the fuzz program over the case reader: first every input that once crashed it, then SECONDS (30) of new
# ones grown from the gallery and the worked cases. What crashes is kept in tests/core/casefile/gallery/fuzz, to be
# committed with the mend; later runs begin with it.
#   tests/fuzz/smoke.sh [SECONDS]
set -euo pipefail
seconds=${1:-30}
[[ $seconds =~ ^[1-9][0-9]*$ ]] || { echo "usage: tests/fuzz/smoke.sh [SECONDS]" >&2; exit 64; }
root=$(cd "$(dirname "${BASH_SOURCE[0]}")/../.." && pwd)
jobs=${HEADBAND_JOBS:-$(nproc)}
build=$root/build/fuzz
kept=$root/tests/core/casefile/gallery/fuzz

mkdir -p "$build"
cmake -S "$root" -B "$build" -G Ninja -C "$root/tests/kinds/fuzz.cmake" >"$build/configure.log" 2>&1 ||
  { cat "$build/configure.log"; exit 1; }
ninja -C "$build" -j "$jobs" read_case_fuzz >"$build/build.log" 2>&1 || { tail -n 40 "$build/build.log"; exit 1; }
program=$build/tests/fuzz/read_case_fuzz

work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
mkdir "$work/seeds" "$work/crashers"
count=0
while IFS= read -r -d '' seed; do
  count=$((count + 1))
  cp "$seed" "$work/seeds/$count.toml"
done < <(find "$root/tests/core/casefile/gallery" "$root/cases" -name '*.toml' -print0)
((count)) || { echo "fuzz smoke: no seeds" >&2; exit 1; }

shopt -s nullglob
old=("$kept"/*)
if ((${#old[@]})); then
  "$program" -timeout=20 "${old[@]}" >"$work/old.log" 2>&1 || { tail -n 40 "$work/old.log"; echo "fuzz smoke: an old crasher crashes again" >&2; exit 1; }
fi
if ! "$program" -max_total_time="$seconds" -max_len=8192 -timeout=20 -rss_limit_mb=2048 -print_final_stats=1 \
  -artifact_prefix="$work/crashers/" "$work/seeds" >"$work/run.log" 2>&1; then
  tail -n 60 "$work/run.log"
  mkdir -p "$kept"
  for crasher in "$work"/crashers/*; do
    cp "$crasher" "$kept/"
    echo "kept: tests/core/casefile/gallery/fuzz/$(basename "$crasher")" >&2
  done
  exit 1
fi
runs=$(sed -n 's/^stat::number_of_executed_units: *//p' "$work/run.log")
# Far fewer runs than seeds would mean that nothing was looked at.
((${runs:-0} >= count)) || { tail -n 20 "$work/run.log"; echo "fuzz smoke: only ${runs:-0} runs" >&2; exit 1; }
echo "fuzz smoke: $runs inputs in $seconds s from $count seeds, ${#old[@]} old crashers, none crashes"
