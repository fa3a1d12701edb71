# Turns tables of facts into C: one string a row, header first, with a null byte behind every cell,
# so that the cells are strings as they stand; and the list of all tables.
#
# Refuses a row with a wrong number of columns, a row without a source, and a row out of order:
# rows are sorted by the bytes of their first column unless a remark says "# order: as written", and
# each key stands once unless one says "# several rows a key".  Run with LC_ALL=C, or the order is another one.

function finish_table() {
  if (name == "")
    return
  if (columns == 0)
    complain("no line names the columns", lines)
  print "  NULL\n};\n"
  widths[count] = columns
}

BEGIN {
  FS = "\t"
  print "/* Made from the tables; a change belongs there.  */"
  print "#include \"config.h\""
  print "#include <stddef.h>"
  print "#include \"support/table.h\"\n"
}

FNR == 1 {
  finish_table()
  name = FILENAME
  sub(/^.*\//, "", name)
  sub(/\.tsv$/, "", name)
  if (name !~ /^[a-z][a-z0-9_]*$/)
    complain("a table's name is of small letters, digits and '_'", 1)
  names[++count] = name
  columns = 0
  as_written = several = 0
  last = ""
  printf "static const char *const %s_rows[] = {\n", name
}

{ lines = FNR }

/\r$/ { complain("the line ends in a carriage return") }

/^#/ {
  if ($0 ~ /^# *order: as written *$/)
    as_written = 1
  if ($0 ~ /^# *several rows a key *$/)
    several = 1
  next
}

/^$/ { complain("an empty line") }

columns == 0 {
  columns = NF
  if ($NF != "source")
    complain("the last column is not 'source'")
  print "  " quoted($0) ","
  next
}

NF != columns { complain(NF " columns where there are " columns) }
$1 == "" { complain("no key in the first column") }
$NF ~ /^[ ]*$/ { complain("no source") }
!as_written && ($1 "") < (last "") { complain("'" $1 "' stands behind '" last "'") }
!several && (name SUBSEP $1) in seen { complain("a second row for '" $1 "'") }

{
  last = $1
  seen[name SUBSEP $1] = 1
  print "  " quoted($0) ","
}

END {
  if (failed)
    exit 1
  finish_table()
  if (failed)
    exit 1
  print "const struct table_text table_built_in[] = {"
  for (i = 1; i <= count; i++)
    printf "  { \"%s\", %d, %s_rows },\n", names[i], widths[i], names[i]
  print "  { NULL, 0, NULL }\n};"
}
