#!/bin/sh
# What machines read: JSON, CSV and text of the same statements agree and keep their form.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session contract
