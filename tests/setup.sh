#!/usr/bin/env bash
# SPDX-License-Identifier: MIT
# Installs what headband needs on Debian 12: `tests/setup.sh build` for building alone, `tests/setup.sh test` for all
# checks as well. Asks dpkg what is missing, says what it installs, does nothing (and needs no network) when nothing is.
set -euo pipefail

build_packages=(g++ cmake ninja-build git ca-certificates libboost-dev libeigen3-dev libhdf5-dev libtomlplusplus-dev
  libcli11-dev libfmt-dev librandom123-dev nlohmann-json3-dev)
test_packages=(ccache libgtest-dev libbenchmark-dev clang-19 clang-tidy-19 clang-format-19 libclang-rt-19-dev gcovr valgrind
  chromium chromium-driver python3 python3-h5py python3-netcdf4 python3-xarray python3-selenium python3-scipy
  python3-numpy netcdf-bin hdf5-tools librsvg2-bin)

case "${1:-}" in
  build) wanted=("${build_packages[@]}") ;;
  test) wanted=("${build_packages[@]}" "${test_packages[@]}") ;;
  *) echo "usage: tests/setup.sh build|test" >&2; exit 64 ;;
esac

if ! command -v dpkg-query >/dev/null; then
  echo "setup: no dpkg here; make sure these are installed (Debian names): ${wanted[*]}" >&2
  exit 0
fi
missing=()
for package in "${wanted[@]}"; do
  status=$(dpkg-query -W -f='${db:Status-Status}' "$package" 2>/dev/null || true)
  [[ $status == installed ]] || missing+=("$package")
done
((${#missing[@]})) || exit 0

as_root=()
if [[ $(id -u) -ne 0 ]]; then
  command -v sudo >/dev/null || { echo "setup: not root and no sudo; please install: ${missing[*]}" >&2; exit 77; }
  as_root=(sudo)
fi
echo "setup: installing ${#missing[@]} package(s): ${missing[*]}"
"${as_root[@]}" apt-get update -qq
"${as_root[@]}" env DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends "${missing[@]}"
