#!/usr/bin/env bash
# Opens the report that `assess` writes in a real headless browser.
# usage: tests/browser/run.sh [RESULTS_FOLDER]     without a folder every demo is assessed
# Exit 0 also where browser or driver cannot be had: that is said loudly.
set -euo pipefail
root=$(cd "$(dirname "$0")/../.." && pwd)
target=${CARGO_TARGET_DIR:-$root/target}
driver=${BROWSER_DRIVER:-$target/browser-driver}

skip() {
    echo "SKIPPED, LOUDLY: $1; the report was NOT opened in a browser"
    exit 0
}

browser=$(command -v chromium || command -v chromium-browser || true)
if [ -z "$browser" ] && command -v apt-get >/dev/null 2>&1 && [ "$(id -u)" = 0 ]; then
    (apt-get update && apt-get install -y --no-install-recommends chromium fonts-dejavu-core poppler-utils) >/dev/null 2>&1 || true
    browser=$(command -v chromium || true)
fi
[ -n "$browser" ] || skip "no chromium here and none can be installed"
command -v npm >/dev/null 2>&1 || skip "no npm here"
mkdir -p "$driver"
cp "$root/tests/browser/package.json" "$root/tests/browser/report.mjs" "$driver/"
[ -d "$driver/node_modules/playwright-core" ] ||
    (cd "$driver" && npm install --no-audit --no-fund --ignore-scripts) >/dev/null 2>&1 || skip "playwright-core cannot be installed from the package registry"

if [ $# -gt 0 ]; then
    BROWSER="$browser" node "$driver/report.mjs" "$1"
    exit
fi
scratch=$(mktemp -d)
trap 'rm -rf "$scratch"' EXIT
for model in "$root"/demo-models/*/*.toml; do
    name=$(basename "$model" .toml)
    "$target/release/brinkline" assess "$model" --out "$scratch/$name" --quiet
    BROWSER="$browser" node "$driver/report.mjs" "$scratch/$name"
done
