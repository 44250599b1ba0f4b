#!/bin/sh
# SPDX-License-Identifier: Apache-2.0
# The main job on the demonstration data: installs what is missing, builds, calibrates, validates, predicts.
# Results go to calibration_demo/out; the spectra are described in calibration_demo/meats/SOURCE.md.
set -eu
cd "$(dirname "$0")/.."

cmake/install-debian-packages.sh
cmake --preset release -DBANDWRIGHT_TESTS=OFF >/dev/null
cmake --build --preset release --target bandwright_cli
bandwright=build/release/bandwright
out=calibration_demo/out
mkdir -p "$out"

say() { printf '\n--- %s\n' "$1"; }
run() { printf '\n$ bandwright'; printf ' %s' "$@"; printf '\n\n'; "$bandwright" "$@"; }

say "1. Build a model for water, fat and protein from 129 standards, cross-validated."
run calibrate calibration_demo/meats/plan.toml --out "$out/meats.model.json" --replace

say "2. Prove it on an independent set; the model that is written remembers the result."
run validate "$out/meats.model.json" --spectra calibration_demo/meats/validation_spectra.csv \
  --reference calibration_demo/meats/validation.csv --out "$out/meats.validated.json" --replace

say "3. Estimate new samples. Flagged results must not be trusted; see the column of reasons."
run predict "$out/meats.validated.json" calibration_demo/meats/new_spectra.csv

say "Next: bandwright show $out/meats.validated.json explains every number; README.md shows how to write a plan."
