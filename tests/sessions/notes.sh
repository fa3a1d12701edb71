#!/bin/sh
# Calculation notes: what `note` writes, and that it can be run again.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session notes
