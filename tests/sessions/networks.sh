#!/bin/sh
# Networks made at random, solved through the language.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session networks
