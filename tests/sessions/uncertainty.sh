#!/bin/sh
# Uncertainty through the language: published examples, another library, random trials.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session uncertainty
