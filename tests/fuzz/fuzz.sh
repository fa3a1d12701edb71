#!/bin/sh
# Two seconds of lines that nobody would type.  By hand, for longer: tests/fuzz/mutate SAMPLES SECONDS
# SEED, or `make fuzz` where clang is, then tests/fuzz/fuzz FOLDER.
set -u
exec tests/fuzz/mutate "${srcdir:-.}/tests/numbers/language_samples.tsv" 2 1
