#!/bin/sh
# Published and computed figures, one statement each: tests/numbers/statements_*.tsv.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session figures
