#!/bin/sh
# Pictures of balances and streams: what `show NAME as picture` writes.
set -u
# shellcheck source=tests/sessions/session.sh
. "${srcdir:-.}/tests/sessions/session.sh"
session pictures
