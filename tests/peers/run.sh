#!/usr/bin/env bash
# Sizes of our bench, then a paired comparison with scikit-fem on the same mesh. Usage: run.sh [ROUNDS] [UNKNOWNS], no peers with 0
# rounds; results go into docs/performance.md.
# Needs Python 3, a C compiler and, for CHOLMOD, the SuiteSparse headers (Debian: libsuitesparse-dev) with a fast BLAS
# (libopenblas0-pthread). Without CHOLMOD it says so and compares with SuperLU alone.
set -euo pipefail
cd "$(dirname "$0")"
rounds=${1:-5}
unknowns=${2:-400000}
venv=${PEERS_VENV:-${CARGO_TARGET_DIR:-../../target}/peers-venv}
[ -x "$venv/bin/python" ] || python3 -m venv "$venv"
"$venv/bin/pip" install -q -r requirements.txt
# The newest release that builds against SuiteSparse 5 as well as 7.
"$venv/bin/python" -c "import sksparse" 2>/dev/null || "$venv/bin/pip" install -q "scikit-sparse==0.4.16" ||
  echo "CHOLMOD could not be had: its rows are left out" >&2
cargo build --release --locked -p fem-core --bench solver
bench=$(cargo build --release --locked -p fem-core --bench solver --message-format=json 2>/dev/null |
  sed -n 's/.*"executable":"\([^"]*solver-[^"]*\)".*/\1/p' | tail -n 1)
# Settings of the machine that would force one kernel on the peers' BLAS are taken away from them.
unset OPENBLAS_CORETYPE OPENBLAS_L2_SIZE
"$venv/bin/python" compare.py --bench "$bench" --rounds "$rounds" --unknowns "$unknowns"
