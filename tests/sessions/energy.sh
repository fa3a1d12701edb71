#!/bin/sh
# Energy and real gases through the language: tests/numbers/energy.tsv, and what has no figure.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session energy
