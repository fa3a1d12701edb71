#!/bin/sh
# Networks with more stated than needed, rounded, and some of it wrong.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session stated
