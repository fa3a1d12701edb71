# Turns the tables of GERG-2008 (make=gerg) or AGA8 DETAIL (make=aga8) into C: constant arrays of
# the types of gerg_table.h and aga8_table.h.
#
# All terms of an equation have the form  coefficient tau^t delta^d exp(-phi(delta)).  Terms that
# differ by nothing but the coefficient share a slot, so that they can be added up for a mixture.
# Here the slots are numbered: by exponential, by d, by t.  t is kept as whole + part/40.

# VALUE as a whole number of eighths.
function eighths_of(value,   k) {
  k = int(8 * value + 0.5)
  if (value < 0 || 8 * value - k > 1e-9 || k - 8 * value > 1e-9)
    complain("an exponential that is not made of eighths of delta and delta^2")
  return k
}

# The number of an exponential, counted as they are met; the first is none at all.  phi is delta^c
# where c is above 2, else (k1 delta + k2 delta^2)/8 - ln(factor).
function exponent_of(c, eta, epsilon, beta, gamma,   key, k1, k2) {
  k1 = c == 1 ? 8 : eighths_of(beta - 2 * eta * epsilon)
  k2 = c == 2 ? 8 : eighths_of(eta)
  key = "{ " (c + 0) ", " (eta + 0) ", " (epsilon + 0) ", " (beta + 0) ", " (gamma + 0) ", " \
    k1 ", " k2 ", " sprintf("%.17g", exp(beta * gamma - eta * epsilon * epsilon)) " }"
  if (!(key in exponent)) {
    exponent[key] = exponents
    exponent_text[exponents++] = key
  }
  return exponent[key]
}

# A place in the order of slots; its number is known when all have been met.
function slot_of(e, d, t,   key) {
  key = sprintf("%02d %02d %08.3f", e, d, t + 1000)
  if (!(key in slot_number)) {
    slot_number[key] = -1
    slot_key[slots++] = key
    slot_e[key] = e
    slot_d[key] = d
    slot_t[key] = t
  }
  return key
}

function sort_slots(   i, j, key) {
  for (i = 1; i < slots; i++) {
    key = slot_key[i]
    for (j = i - 1; j >= 0 && (slot_key[j] "") > (key ""); j--)
      slot_key[j + 1] = slot_key[j]
    slot_key[j + 1] = key
  }
  for (i = 0; i < slots; i++)
    slot_number[slot_key[i]] = i
}

function whole_of(t,   w) {
  w = int(t)
  return w > t ? w - 1 : w
}

function print_form(   i, key, t, part) {
  printf "static const struct helmholtz_exponent %s_exponents[] = {\n", make
  for (i = 0; i < exponents; i++)
    print "  " exponent_text[i] ","
  printf "};\n\nstatic const struct helmholtz_slot %s_slots[] = {\n", make
  for (i = 0; i < slots; i++) {
    key = slot_key[i]
    t = slot_t[key]
    part = (t - whole_of(t)) * 40
    if (part - int(part + 0.5) > 1e-6 || int(part + 0.5) - part > 1e-6)
      complain("an exponent of tau that is no multiple of 1/40")
    printf "  { %d, %d, %d, %d },\n", slot_e[key], slot_d[key], whole_of(t), int(part + 0.5)
  }
  print "};\n"
}

function index_of(key) {
  if (!(key in component))
    complain("no component '" key "'")
  return component[key]
}

function new_component(key) {
  if (length(key) > 7)
    complain("a key of more than seven letters")
  component[key] = components++
}

BEGIN {
  FS = "\t"
  at_component = -1
  exponents = slots = components = terms = functions = pairs = 0
  exponent_of(0, 0, 0, 0, 0)
  print "/* Made from the tables; a change belongs there.  */\n"
}

FNR == 1 {
  name = FILENAME
  sub(/^.*\//, "", name)
  sub(/\.tsv$/, "", name)
  header = 0
}

/^#/ { next }
!header { header = 1; next }

name == "gerg_components" {
  new_component($1)
  row[$1] = sprintf("{ \"%s\", %se-3, %s, %se3 }", $1, $2, $3, $4)
  order[components - 1] = $1
}

name == "gerg_ideal" {
  if (index_of($1) != ideals++)
    complain("not in the order of the components")
  ideal[ideals - 1] = $2 ", " $3 ", { " $4 ", " $5 ", " $6 ", " $7 ", " $8 " }, { " \
    $9 ", " $10 ", " $11 ", " $12 " }"
}

name == "gerg_pure" {
  if (index_of($1) != at_component) {
    at_component = index_of($1)
    first[at_component] = terms
  }
  term_n[terms] = $2
  term_slot[terms++] = slot_of(exponent_of($5, 0, 0, 0, 0), $3, $4)
}

name == "gerg_departure" {
  if (!($1 in departure)) {
    departure[$1] = functions
    departure_first[functions++] = terms
  }
  term_n[terms] = $2
  term_slot[terms++] = slot_of($5 + 0 == 0 && $7 + 0 == 0 ? 0 : exponent_of(0, $5, $6, $7, $8),
                               $3, $4)
}

name == "gerg_pairs" {
  if (index_of($1) >= index_of($2))
    complain("the second component stands before the first")
  if ($8 != "" && !($8 in departure))
    complain("no departure function '" $8 "'")
  pair[pairs++] = "{ " index_of($1) ", " index_of($2) ", " $3 ", " $4 ", " $5 ", " $6 ", " \
    ($7 == "" ? 0 : $7) ", " ($8 == "" ? -1 : departure[$8]) " }"
}

name == "aga8_components" {
  new_component($1)
  row[$1] = sprintf("{ \"%s\", %se-3, %s, %s, %s, %s, %s, %s, %s }", $1, $2, $3, $4, $5, $6, $7,
                    $8, $9)
  order[components - 1] = $1
}

name == "aga8_pairs" {
  if (index_of($1) >= index_of($2))
    complain("the second component stands before the first")
  stated[index_of($1), index_of($2)] = "{ " $3 ", " $4 ", " $5 ", " $6 " }"
}

name == "aga8_terms" {
  if ($1 != ++terms)
    complain("the terms are not counted from 1")
  term[terms] = $2 ", " $6 ", " $7 ", " $8 ", " $9 ", " $10 ", " $11
  linear[terms] = terms <= 18 ? slot_of(0, 1, $6) : ""
  reduced[terms] = terms >= 13 ? slot_of($4 + 0 == 0 ? 0 : exponent_of($5, 0, 0, 0, 0), $3, $6) : ""
}

function print_components(   i) {
  printf "static const struct %s_component %s_components[] = {\n", make, make
  for (i = 0; i < components; i++)
    print "  " row[order[i]] ","
  print "};\n"
}

function print_pairs(   i) {
  printf "static const struct %s_pair %s_pairs[] = {\n", make, make
  for (i = 0; i < pairs; i++)
    print "  " pair[i] ","
  print "};\n"
}

# The triangle i < j, in full.
function fill_pairs(   i, j) {
  for (i = 0; i < components; i++)
    for (j = i + 1; j < components; j++)
      pair[pairs++] = (i, j) in stated ? stated[i, j] : "{ 1, 1, 1, 1 }"
}

function print_gerg(   i) {
  print "static const struct gerg_ideal gerg_ideals[] = {"
  for (i = 0; i < ideals; i++)
    print "  { " ideal[i] " },"
  print "};\n\nstatic const struct gerg_term gerg_terms[] = {"
  for (i = 0; i < terms; i++)
    print "  { " slot_number[term_slot[i]] ", " term_n[i] " },"
  print "};\n\nstatic const short gerg_pure_first[] = {"
  for (i = 0; i < components; i++)
    print "  " first[i] ","
  print "  " departure_first[0] "\n};\n\nstatic const short gerg_departure_first[] = {"
  for (i = 0; i < functions; i++)
    print "  " departure_first[i] ","
  print "  " terms "\n};"
}

function print_aga8(   i) {
  print "static const struct aga8_term aga8_terms[] = {"
  for (i = 1; i <= terms; i++)
    print "  { " term[i] ", " (linear[i] == "" ? -1 : slot_number[linear[i]]) ", " \
      (reduced[i] == "" ? -1 : slot_number[reduced[i]]) " },"
  print "};"
}

END {
  if (failed)
    exit 1
  sort_slots()
  print_form()
  print_components()
  if (make == "aga8")
    fill_pairs()
  print_pairs()
  if (make == "gerg")
    print_gerg()
  else
    print_aga8()
}
