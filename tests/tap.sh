# shellcheck shell=sh
# What the tests in shell share: sourced, from a working directory of any kind.
#
#   tell "$(list what is wrong)" "name of the check"      good if the list is empty
#   skip "why" "name of the check"
#   finish                                                prints the plan; ends the script

# The source tree; the scripts read it.
# shellcheck disable=SC2034
top=$(cd "${srcdir:-.}" && pwd) || exit 99
count=0
failed=0

tell() {
  count=$((count + 1))
  if [ -z "$1" ]; then
    printf 'ok %d - %s\n' "$count" "$2"
  else
    printf 'not ok %d - %s\n' "$count" "$2"
    printf '%s\n' "$1" | sed 's/^/#   /'
    failed=1
  fi
}

skip() {
  count=$((count + 1))
  printf 'ok %d - %s # SKIP %s\n' "$count" "$2" "$1"
}

finish() {
  printf '1..%d\n' "$count"
  exit "$failed"
}
