#!/bin/sh
# Analyses from files: bad ones refused at their place, good ones read in every layout.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session files
