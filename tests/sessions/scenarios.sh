#!/bin/sh
# Worked problems of the trade: figures within their tolerances, and what must be said with them.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session scenarios
