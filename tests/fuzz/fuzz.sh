#!/bin/sh
# Two seconds of lines that nobody would type, in a folder of its own.  By hand, for longer:
# tests/fuzz/mutate SAMPLES BLOCKS SECONDS SEED where digester.csv and cleaned.csv are, or `make fuzz`
# where clang is, then tests/fuzz/fuzz FOLDER.
set -u
top=$(cd "${srcdir:-.}" && pwd) && mutate=$PWD/tests/fuzz/mutate && work=$(mktemp -d) || exit 99
trap 'rm -rf "$work"' EXIT
cp "$top/tables/demo/digester.csv" "$top/tables/demo/cleaned.csv" "$work" && cd "$work" || exit 99
"$mutate" "$top/tests/numbers/language_samples.tsv" "$top/tests/fuzz/blocks.gw" 2 1
