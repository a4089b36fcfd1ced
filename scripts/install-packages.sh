#!/usr/bin/env bash
# Installs the Debian packages that are missing; does nothing where none is. Usage:
#   scripts/install-packages.sh [build|test]
#     build   what it takes to build and run tincture (the default)
#     test    that, and what the tests need
set -euo pipefail

build_packages=(
    g++ cmake ninja-build pkg-config
    libpng-dev zlib1g-dev libjpeg62-turbo-dev libtiff-dev libwebp-dev libavif-dev  # pictures
    liblcms2-dev                                                                   # colour profiles
    libhwy-dev libtbb-dev                                                          # speed
    libcli11-dev nlohmann-json3-dev libstb-dev fonts-roboto-unhinted
)
test_packages=(
    libgtest-dev libgmock-dev
    libopencv-core-dev libopencv-imgcodecs-dev  # what the benchmarks compare with
    python3 python3-pytest python3-numpy python3-pil python3-jsonschema
    clang-14 libclang-rt-14-dev clang-format-14
    qemu-user  # older processors, emulated: the same bytes there
)

wanted=("${build_packages[@]}")
case "${1:-build}" in
    build) ;;
    test) wanted+=("${test_packages[@]}") ;;
    *)
        echo "usage: scripts/install-packages.sh [build|test]" >&2
        exit 2
        ;;
esac

missing=()
for package in "${wanted[@]}"; do
    status=$(dpkg-query -W -f '${db:Status-Status}' "$package" 2>/dev/null || true)
    [ "$status" = installed ] || missing+=("$package")
done
if [ ${#missing[@]} -eq 0 ]; then
    echo "All Debian packages are there."
    exit 0
fi

as_root=()
if [ "$(id -u)" -ne 0 ]; then
    command -v sudo >/dev/null || {
        echo "Missing: ${missing[*]}. Install them as root, or install sudo." >&2
        exit 1
    }
    as_root=(sudo)
fi
echo "Installing with apt: ${missing[*]}"
export DEBIAN_FRONTEND=noninteractive
"${as_root[@]}" apt-get update -qq
"${as_root[@]}" env DEBIAN_FRONTEND=noninteractive \
    apt-get install -y -qq --no-install-recommends "${missing[@]}" >/dev/null
