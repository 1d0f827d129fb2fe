#!/usr/bin/env bash
# Reads the fields that `assess` writes with two independent readers from the Python package registry.
# usage: tests/readers/run.sh [RESULTS_FOLDER]     without a folder the first demo is assessed
# Exit 0 also where the readers cannot be had: that is said loudly.
set -euo pipefail
root=$(cd "$(dirname "$0")/../.." && pwd)
target=${CARGO_TARGET_DIR:-$root/target}
environment=${READERS_ENVIRONMENT:-$target/readers-venv}
mkdir -p "$target"
if ! { [ -x "$environment/bin/python" ] || python3 -m venv "$environment"; } >/dev/null 2>&1 ||
    ! "$environment/bin/python" -m pip install --quiet --disable-pip-version-check "meshio==5.3.5" "vtk>=9.3" "numpy>=1.26" >/dev/null 2>&1; then
    echo "SKIPPED, LOUDLY: the independent field readers (meshio, vtk) cannot be installed here; the fields were NOT read back"
    exit 0
fi
if [ $# -eq 0 ]; then
    scratch=$(mktemp -d)
    trap 'rm -rf "$scratch"' EXIT
    model=$(ls "$root"/demo-models/*/*.toml | head -n 1)
    "$target/release/brinkline" assess "$model" --out "$scratch/results" --quiet
    "$target/release/brinkline" assess "$model" --out "$scratch/linear" --quiet --linear-triangles
    "$environment/bin/python" "$root/tests/readers/check_fields.py" "$scratch/linear"
    set -- "$scratch/results"
fi
"$environment/bin/python" "$root/tests/readers/check_fields.py" "$1"
