#!/bin/sh
# Two seconds of files that no laboratory would hand over.  By hand, for longer:
# tests/fuzz/mutate_cells SECONDS SEED FILE..., or `make fuzz` where clang is, then
# tests/fuzz/fuzz_cells FOLDER.
set -u
demo=${srcdir:-.}/tables/demo
exec tests/fuzz/mutate_cells 2 1 "$demo/digester.csv" "$demo/cleaned.csv" \
  "${srcdir:-.}/tests/fuzz/by_component.csv" "${srcdir:-.}/tests/fuzz/in_long.csv"
