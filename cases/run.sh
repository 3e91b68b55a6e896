#!/usr/bin/env bash
# SPDX-License-Identifier: MIT
# Builds headband (installing what building needs) and runs a study of this folder: check, one surge run, the sampled
# surge, each with its page.   cases/run.sh [NAME]     NAME a folder beside this script
set -euo pipefail
here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
root=$(dirname "$here")
name=${1:-hollowmere-gravity-main}
case_file=$here/$name/case.toml
[[ -f $case_file ]] || { echo "no case $name here; there are: $(cd "$here" && ls -d ./*/ | tr -d './' | tr '\n' ' ')" >&2; exit 66; }

"$root/tests/setup.sh" build
build=$root/build/release
if [[ ! -f $build/build.ninja ]]; then
  mode=OFF
  [[ -f /usr/include/gtest/gtest.h && -f /usr/include/benchmark/benchmark.h ]] && mode=ON
  cmake -S "$root" -B "$build" -G Ninja -C "$root/tests/kinds/release.cmake" -DHEADBAND_DEVELOPER_MODE=$mode >/dev/null
fi
if [[ -t 1 ]]; then ninja -C "$build" headband; else
  echo "building headband in $build (minutes the first time, seconds afterwards)"
  ninja -C "$build" --quiet headband
fi
headband=$build/montecarlo/program/headband

# Results go to build/cases/NAME; a step is repeated only where the program or the case is newer than its result.
out=$root/build/cases/$name
mkdir -p "$out"
cd "$out"
fresh() { [[ -f $1 && $1 -nt $headband && -z $(find "$here/$name" -newer "$1" -print -quit) ]]; }
"$headband" check "$case_file"
for verb in surge band; do
  options=()
  [[ $verb == band ]] && options=(--surge)
  if fresh "case-$verb.h5" && fresh "case-$verb.html"; then
    "$headband" report "case-$verb.h5" --report "case-$verb.html" -f >/dev/null
    echo "$verb: nothing changed, result kept"
  else
    "$headband" $verb "${options[@]}" "$case_file" --report "$out/case-$verb.html" -f
  fi
done
echo
echo "Results:  $out/case-surge.h5  $out/case-band.h5"
echo "Report:   $out/case-band.html   (one run: $out/case-surge.html)"
