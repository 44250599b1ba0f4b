#!/usr/bin/env bash
# SPDX-License-Identifier: Apache-2.0
# Leave-one-out beside scikit-learn, in one run. Arguments: jobs, default a and b.
set -euo pipefail
cd "$(dirname "$0")/.."

if ! /usr/bin/python3 -c 'import sklearn' 2>/dev/null; then
  apt-get install -y --no-install-recommends python3-sklearn
fi
cmake --preset bench
cmake --build --preset bench

data=$(mktemp -d)
trap 'rm -rf "$data"' EXIT
build/bench/bandwright_bench "$data" "$@"
/usr/bin/python3 bench/peer.py "$data" "$@"
