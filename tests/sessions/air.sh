#!/bin/sh
# Air by the gas model against another library's equation for it.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session air
