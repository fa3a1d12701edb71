#!/bin/sh
# Sheets of stated figures.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session sheets
