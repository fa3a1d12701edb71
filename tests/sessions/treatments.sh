#!/bin/sh
# Treatments of analyses, and concentrations of traces in wet and dry gas.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session treatments
