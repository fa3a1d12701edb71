#!/bin/sh
# Quantities moved to an aim, against closed forms and against every corner.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session trims
