#!/usr/bin/env bash
# SPDX-License-Identifier: MIT
# Re-makes the vendored plot script from its npm package, or with --check only compares. Needs npm and openssl.
set -euo pipefail
cd "$(dirname "${BASH_SOURCE[0]}")"
version=1.6.32
sha512='KIMVnG68zvu5XXUbC4LQEPnhwOxBuLyW1AHtpm6IKTXImkbLgkMy+jabjLgSLMasNuGGzQm/ep3tOkyTxpiQIw=='
room=$(mktemp -d)
trap 'rm -rf "$room"' EXIT

(cd "$room" && npm pack --silent "uplot@$version" >/dev/null)
seen=$(openssl dgst -sha512 -binary "$room/uplot-$version.tgz" | openssl base64 -A)
[[ $seen == "$sha512" ]] || { echo "uplot-$version.tgz: sha512 is $seen, expected $sha512" >&2; exit 1; }
tar -xzf "$room/uplot-$version.tgz" -C "$room"

same=yes
put() {
  if [[ ${1:-} == --check ]]; then
    cmp -s "$2" "$3" || { echo "$3 differs from uplot $version" >&2; same=no; }
  else
    install -m 0644 "$2" "$3"
  fi
}
put "${1:-}" "$room/package/dist/uPlot.iife.min.js" uplot.min.js
put "${1:-}" "$room/package/dist/uPlot.min.css" uplot.min.css
put "${1:-}" "$room/package/LICENSE" LICENSE
[[ $same == yes ]] && echo "uplot $version: the three files are those of the package"
