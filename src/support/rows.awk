# What the scripts that turn tables into C share.  Stands before them: awk -f rows.awk -f ...

# Tells what is wrong with a line of the table, the present one where LINE is left out, and stops.
function complain(what, line) {
  printf "%s:%d: %s\n", FILENAME, line == "" ? FNR : line, what > "/dev/stderr"
  failed = 1
  exit 1
}

# S as a C string.  '?' is escaped because "??=" would be a trigraph; a tab ends a cell.
function quoted(s,   i, c, made) {
  made = ""
  for (i = 1; i <= length(s); i++) {
    c = substr(s, i, 1)
    if (c == "\\" || c == "\"" || c == "?")
      made = made "\\" c
    else if (c == "\t")
      made = made "\\000"
    else
      made = made c
  }
  return "\"" made "\""
}
