#!/bin/sh
# Random figures go there and back, in any unit and order, and nothing is lost.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session roundtrips
