# The pages of help (src/language/topics.def) as lines, or as the part of gaswright.7 made of them.
#
#   awk -f topics.awk topics.def                 topic, say, get, example: a tab between, one line each
#   awk -f topics.awk topics.def gaswright.7     the page, with the part between its two marks renewed

# The next text in quotes of `rest`, its escapes undone.
function quoted(    text) {
  match(rest, /"([^"\\]|\\.)*"/)
  text = substr(rest, RSTART + 1, RLENGTH - 2)
  rest = substr(rest, RSTART + RLENGTH)
  gsub(/\\"/, "\"", text)
  gsub(/\\\\/, "\\", text)
  return text
}

# For the formatter: signs that it would otherwise print as other characters.
function roff(text) {
  gsub(/\\/, "\\e", text)
  gsub(/-/, "\\-", text)
  gsub(/\^/, "\\(ha", text)
  gsub(/~/, "\\(ti", text)
  gsub(/'/, "\\(aq", text)
  gsub(/"/, "\\(dq", text)
  gsub(/±/, "\\(+-", text)
  return text ~ /^\./ ? "\\\\&" text : text
}

function sentence(text) {
  return toupper(substr(text, 1, 1)) substr(text, 2) "."
}

function print_page(    i, last) {
  for (i = 1; i <= count; i++) {
    if (topic[i] != last)
      print ".SS " topic[i]
    last = topic[i]
    print ".TP"
    print ".B \"" roff(say[i]) "\""
    print roff(sentence(get[i]))
    print ".EX"
    print roff(example[i])
    print ".EE"
  }
}

FNR == 1 { files++ }

files == 1 {
  definitions = definitions $0 "\n"
  next
}

/^\.\\" topics: begin/ { print; read_topics(); print_page(); skipping = 1; next }
/^\.\\" topics: end/ { skipping = 0 }
!skipping

function read_topics() {
  rest = definitions
  gsub(/\/\*[^*]*\*+([^\/*][^*]*\*+)*\//, "", rest)
  while (match(rest, /TOPIC \(/)) {
    count++
    topic[count] = quoted()
    say[count] = quoted()
    get[count] = quoted()
    example[count] = quoted()
  }
}

END {
  if (files == 1) {
    read_topics()
    for (i = 1; i <= count; i++)
      print topic[i] "\t" say[i] "\t" get[i] "\t" example[i]
  }
}
