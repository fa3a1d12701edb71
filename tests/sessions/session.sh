# shellcheck shell=sh
# Runs the checks of sessions written in Python, which speak TAP themselves: sourced, with the name.
#
#   session NAME        runs tests/sessions/NAME.py, or skips it where there is no python3

session() {
  # A python3 of the system first: only the standard library is used.
  for python in ${PYTHON:+"$PYTHON"} /usr/bin/python3 python3; do
    if command -v "$python" > /dev/null 2>&1; then
      PYTHONUTF8=1 PYTHONDONTWRITEBYTECODE=1 exec "$python" "${srcdir:-.}/tests/sessions/$1.py"
    fi
  done
  echo "1..0 # SKIP python3 is not installed"
  exit 0
}
