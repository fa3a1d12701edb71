#!/bin/sh
# Facts that hang on last digits, that clash, and that hold only where nothing flows.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session clashes
