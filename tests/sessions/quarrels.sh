#!/bin/sh
# Stated figures off by a factor of the trade: tests/sessions/quarrels.tsv.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session quarrels
