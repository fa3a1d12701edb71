# Turns tables/messages.tsv into C.
#
# With make=kinds, the enum of kinds: `number-comma` becomes MESSAGE_NUMBER_COMMA.  With make=rows,
# one line a kind: MESSAGE_ROW (NUMBER_COMMA, "number-comma", ERROR, "sentence", "way on").  The
# form of the rows is proved by embed.awk; here only what is particular to messages.

BEGIN {
  FS = "\t"
  print "/* Made from tables/messages.tsv; a change belongs there.  */"
  if (make == "kinds") {
    print "#ifndef MESSAGE_KINDS_H\n#define MESSAGE_KINDS_H\n"
    print "enum message {\n  MESSAGE_NONE,"
  }
}

/^#/ { next }

!header {
  header = 1
  if ($0 != "kind\tseverity\tsentence\tway_on\tsource")
    complain("the columns are kind, severity, sentence, way_on, source")
  next
}

{
  if ($1 !~ /^[a-zA-Z][a-zA-Z0-9]*(-[a-zA-Z0-9]+)*$/)
    complain("a kind is of letters, digits and single '-'")
  if ($2 !~ /^(error|taken|note|caution)$/)
    complain("the severity is error, taken, note or caution")
  if ($3 == "")
    complain("no sentence")
  kind = toupper($1)
  gsub(/-/, "_", kind)
  if (kind ~ /^(NONE|COUNT|FACTS|ROW)$/ || kind in seen)
    complain("the kind '" $1 "' is taken")
  seen[kind] = 1
  if (make == "kinds")
    printf "  MESSAGE_%s,\n", kind
  else
    printf "MESSAGE_ROW (%s, %s, %s, %s, %s)\n", kind, quoted($1), toupper($2), quoted($3), quoted($4)
}

END {
  if (failed)
    exit 1
  if (make == "kinds")
    print "  MESSAGE_COUNT\n};\n\n#endif"
}
