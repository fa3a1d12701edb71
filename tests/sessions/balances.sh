#!/bin/sh
# Balances worked out elsewhere, put into the language and solved.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session balances
