#!/bin/sh
# Statements run once for each row of a table.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session rows
