#!/usr/bin/env bash
# Builds tincture and reduces a picture to few colours: yours, or a sample.
#   scripts/run.sh [PICTURE]
set -euo pipefail
here=$(pwd)
root=$(cd "$(dirname "$0")/.." && pwd)

if [ $# -gt 1 ]; then
    echo "usage: scripts/run.sh [PICTURE]" >&2
    exit 2
fi
picture=${1:-$root/sample-images/lantern-regatta-poster.png}
case "$picture" in -*) picture=./$picture ;; esac

echo "1. Debian packages"
"$root/scripts/install-packages.sh" build

echo "2. Building the release (the first time takes a minute or two)"
cd "$root"
# Without the tests, which need further packages; `scripts/test.sh` turns them on again.
cmake --preset release -DTINCTURE_TESTS=OFF >/dev/null
cmake --build --preset release --target tincture -- --quiet

cd "$here"
name=$(basename -- "$picture")
echo "3. tincture reduce $name"
echo
"$root/build/release/tincture" reduce --force --out "${name%.*}-tincture" -- "$picture"
echo
echo "Look at: ${name%.*}-tincture/reduced.png, swatches.svg and curve.svg beside it."
