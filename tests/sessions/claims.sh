#!/bin/sh
# Stated figures made up under a known reading of the table, and noise.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session claims
