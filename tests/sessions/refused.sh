#!/bin/sh
# Lines that read well and are refused all the same: kind and column, and the session unharmed.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session refused
