#!/bin/sh
# No file includes from a later layer, and every folder of src is a layer.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
cd "$top" || exit 99

layers=$(cat src/layers)
seen=
for layer in $layers; do
  seen="$seen $layer"
  allowed=$seen
  [ "$layer" != report ] || allowed=$(echo "$seen" | sed 's/ language//')
  # shellcheck disable=SC2046  # no file of ours has a blank in its name
  tell "$(LC_ALL=C awk -v allowed="$allowed" '
    BEGIN { n = split(allowed, a, / +/); for (i = 1; i <= n; i++) good[a[i]] = 1 }
    /^[ \t]*#[ \t]*include[ \t]*"[^"]*\// {
      split($0, part, /"/)
      from = part[2]
      sub(/\/.*/, "", from)
      if (!(from in good)) print FILENAME ":" FNR ": includes " part[2]
    }' /dev/null $(find "src/$layer" -name '*.[ch]' -o -name '*.def'))" \
    "$layer includes only itself and what lies beneath"
done

tell "$(for folder in src/*/; do
  folder=${folder#src/}
  echo "$layers" | grep -qx "${folder%/}" || echo "src/$folder is not in src/layers"
done)" "every folder of src is a layer"

tell "$(for layer in $layers; do
  [ -d "src/$layer" ] || echo "src/$layer is missing"
done)" "every layer is a folder of src"
finish
