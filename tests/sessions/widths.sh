#!/bin/sh
# No line of an answer is wider than the terminal, or than 100 characters.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session widths
