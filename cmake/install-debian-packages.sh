#!/bin/sh
# SPDX-License-Identifier: Apache-2.0
# Installs what is needed on Debian 12; what is there already is left alone, and then no network is needed.
#   install-debian-packages.sh            to build, test and run
#   install-debian-packages.sh develop    also linter, formatter, fuzzer, compiler cache
set -eu

build="build-essential cmake ninja-build libeigen3-dev libarmadillo-dev libopenblas-pthread-dev libcli11-dev
  libtomlplusplus-dev nlohmann-json3-dev libboost-dev libfmt-dev libssl-dev libgtest-dev libgmock-dev
  librapidcheck-dev"
develop="git ca-certificates ccache clang-16 clang-format-16 clang-tidy-16 libclang-rt-16-dev"

case "${1:-}" in
  '') wanted=$build ;;
  develop) wanted="$build $develop" ;;
  *) echo "usage: $0 [develop]" >&2; exit 2 ;;
esac

missing=
for package in $wanted; do
  [ "$(dpkg-query -W -f '${db:Status-Status}' "$package" 2>/dev/null)" = installed ] || missing="$missing $package"
done
[ -n "$missing" ] || exit 0

as_root=
[ "$(id -u)" = 0 ] || as_root=sudo
export DEBIAN_FRONTEND=noninteractive
$as_root apt-get update
# shellcheck disable=SC2086
$as_root apt-get install -y --no-install-recommends $missing
