#!/bin/sh
# How answers came about: what `workings` tells of every kind of answer.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session workings
