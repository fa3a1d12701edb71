#!/bin/sh
# Builds gaswright if need be and starts it: sh src/start.sh [OPTION...] [FILE...]
#
# The build lives in the user's cache folder, apart from this source tree, which is only read; it is
# brought up to date when a source file has changed.  What the building says goes to a log.
set -u
umask 022

here=$(cd "$(dirname "$0")" && pwd -P) || exit 1
top=$(dirname "$here")
# shellcheck source=src/house.sh
. "$here/house.sh"

# The folder for the build of this tree.
cache=${XDG_CACHE_HOME:-}
case $cache in
  /*) ;;
  *) cache=${HOME:-/nonexistent}/.cache ;;
esac
if ! plain_name "$cache" || ! mkdir -p "$cache/gaswright" 2> /dev/null \
    || [ ! -w "$cache/gaswright" ]; then
  cache=/tmp/cache-$(id -u)
  mkdir -m 700 "$cache" 2> /dev/null
  if [ "$(stat -c %u "$cache" 2> /dev/null)" != "$(id -u)" ]; then
    say "cannot build: no folder to write in; set XDG_CACHE_HOME to one"
    exit 1
  fi
fi
key=$(printf '%s' "$top" | cksum | cut -d ' ' -f 1)
place=$cache/gaswright/$key
mkdir -p "$place" || exit 1

prepare() {
  # One at a time, if two are started at once.
  if command -v flock > /dev/null 2>&1; then
    flock 9
  fi
  mirror "$top" "$place/source" || { say "cannot copy the source to $place"; return 1; }
  if [ -x "$place/build/gaswright" ] && cmp -s "$place/source/.manifest" "$place/built"; then
    return 0
  fi
  rm -f "$place/built"
  need_for_build
  must_have=$needed
  need_for_prompt
  install_needed || [ -z "$must_have" ] || return 1
  [ -x "$place/build/gaswright" ] || say "building; this takes a minute the first time"
  build "$place/source" "$place/build" || return 1
  cp "$place/source/.manifest" "$place/built"
}

prepare 9> "$place/lock" || exit 1
exec "$place/build/gaswright" "$@"
