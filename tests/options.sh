#!/bin/sh
# The options are the same in src/shell/options.def, --help, gaswright.1 and the completion files.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
work=$(mktemp) || exit 99
trap 'rm -f "$work"' EXIT

shell=$top/src/shell
options=$(LC_ALL=C sed -n "s/^OPTION ([A-Z_]*, \([^,]*\), \"\([a-z-]*\)\".*/\1 \2/p" \
  "$shell/options.def" | sed "s/'\(.\)'/-\1/; s/^0 //" | tr ' ' '\n' |
  sed 's/^\([^-]..*\)/--\1/' | LC_ALL=C sort -u)
tell "$([ "$(printf '%s\n' "$options" | wc -l)" -ge 9 ] || echo "found: $options")" \
  "options.def can be read"

# Prints the options among the words of standard input: "-x", "--long".
words() {
  LC_ALL=C tr -c 'A-Za-z0-9-' '\n' | LC_ALL=C grep -xE -e '-[A-Za-z]|--[a-z]+(-[a-z]+)*' |
    LC_ALL=C sort -u
}

# same NAME: the options on standard input are those of options.def.
same() {
  found=$(words)
  tell "$(
    for option in $options; do
      printf '%s\n' "$found" | grep -qxF -e "$option" || echo "lacks $option"
    done
    for option in $found; do
      printf '%s\n' "$options" | grep -qxF -e "$option" || echo "has $option, which is no option"
    done)" "$1"
}

"$GASWRIGHT" --help > "$work" 2>&1
same "--help has every option" < "$work"

# The page's section of options, with \- as it prints.
sed -n '/^\.SH OPTIONS/,/^\.SH [^O]/p' "$top/man/gaswright.1" | sed 's/\\-/-/g; s/\\f[A-Z]/ /g' |
  sed '/^\.SH/d' > "$work"
same "gaswright.1 has every option" < "$work"

sed -n '/compgen -W .$/,/-- "/p; /^ *-[a-z] | --/p; /^ *--[a-z]*)/p' \
  "$shell/completions/bash/gaswright" | sed 's/ -- ".word"//; s/compgen -W//' > "$work"
same "the completion for bash has every option" < "$work"

sed -n '/_arguments/,$p' "$shell/completions/zsh/_gaswright" |
  sed '1d; s/(- \*)//; s/\[[^]]*\]/ /' > "$work"
same "the completion for zsh has every option" < "$work"

if command -v bash > /dev/null 2>&1; then
  # What is offered behind a line: the words, then the number of the one to complete.
  offers() {
    bash -c 'source "$1"; shift; COMP_CWORD=$1; shift; COMP_WORDS=("$@"); _gaswright
      printf "%s\n" "${COMPREPLY[@]}"' - "$shell/completions/bash/gaswright" "$@" | tr '\n' ' '
  }
  is() { tell "$([ "$1" = "$2" ] || echo "'$1', not '$2'")" "$3"; }
  is "$(offers 1 gaswright --fo)" "--format " "bash completes an option"
  is "$(offers 2 gaswright -f j)" "json " "bash completes a form"
  is "$(offers 3 gaswright --format = j)" "json " "bash completes a form behind '='"
  is "$(offers 2 gaswright --format =)" "text json csv " "bash offers all forms behind '='"
  is "$(offers 2 gaswright --color a)" "auto always " "bash completes when to colour"
else
  skip "no bash" "the completion for bash runs"
fi
finish
