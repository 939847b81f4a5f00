#!/usr/bin/env bash
# Every check of the project, with the set-up it needs: formatting, lints and forbidden calls, all tests, samples up to date.
set -euo pipefail
cd "$(dirname "$0")/.."
export CARGO_TERM_COLOR=never CARGO_INCREMENTAL="${CARGO_INCREMENTAL:-1}"

# Readers nobody here wrote: PDF, SVG and XML tools, a browser, and a Python with general-purpose libraries.
missing=()
command -v pdftotext >/dev/null 2>&1 || missing+=(poppler-utils)
command -v xmllint >/dev/null 2>&1 || missing+=(libxml2-utils)
command -v rsvg-convert >/dev/null 2>&1 || missing+=(librsvg2-bin)
command -v chromium >/dev/null 2>&1 || missing+=(chromium)
if [ ${#missing[@]} -gt 0 ]; then
  apt-get update -qq
  DEBIAN_FRONTEND=noninteractive apt-get install -y -qq "${missing[@]}" >/dev/null
fi
python="target/python/bin/python"
if ! "$python" -c 'import structuralcodes, jsonschema, numpy, PIL' >/dev/null 2>&1; then
  mkdir -p target
  python3 -m venv target/python 2>/dev/null || { apt-get update -qq; DEBIAN_FRONTEND=noninteractive apt-get install -y -qq python3-venv >/dev/null; python3 -m venv target/python; }
  target/python/bin/pip install --quiet --disable-pip-version-check 'structuralcodes==0.7.2' 'jsonschema>=4,<5' 'numpy>=2,<3' 'pillow>=11,<13'
fi
export SLABWRIGHT_PYTHON="$PWD/$python" SLABWRIGHT_TOOLS=1

cargo fmt --check
cargo clippy --locked --all-targets -- -D warnings
cargo test --locked

# The gallery of the README: the first sheet of every sample as a picture, from the outputs that the tests found up to date.
mkdir -p samples/pictures
for job in samples/*.toml; do
  name="$(basename "$job" .toml)"
  pdftoppm -r 75 -gray -png -singlefile "samples/$name/"*-sheet.pdf "samples/pictures/$name"
done
