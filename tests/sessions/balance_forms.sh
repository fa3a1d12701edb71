#!/bin/sh
# Every form of a fact, and balances that change, go and come back.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session balance_forms
