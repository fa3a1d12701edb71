#!/bin/sh
# Bad input of every kind: the right fault at the right place, and the session goes on unharmed.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session bad
