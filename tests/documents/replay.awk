# Prints a document with the output in its sessions as the program prints it now.
#
#   awk -v begin=MARK -v end=MARK [-v roff=1] -f replay.awk DOCUMENT
#
# A session stands between lines that begin with the two marks.  Its lines with "> " in front are
# typed; what stands under one is what comes of it, errors included.  A block without such lines is
# printed as it is.  With roff, signs are written as man/topics.awk writes them.  The program is
# $GASWRIGHT; the working folder takes a file or two.

function from_roff(text) {
  if (roff) {
    gsub(/\\-/, "-", text)
    gsub(/\\\(aq/, "'", text)
    gsub(/\\\(dq/, "\"", text)
    gsub(/\\\(ti/, "~", text)
    gsub(/\\\(ha/, "^", text)
    gsub(/\\\(\+-/, "±", text)
    gsub(/\\e/, "\\", text)
  }
  return text
}

function to_roff(text) {
  if (roff) {
    gsub(/\\/, "\\e", text)
    gsub(/-/, "\\-", text)
    gsub(/'/, "\\(aq", text)
    gsub(/"/, "\\(dq", text)
    gsub(/~/, "\\(ti", text)
    gsub(/\^/, "\\(ha", text)
    gsub(/±/, "\\(+-", text)
  }
  return text
}

# What the last of the lines typed so far printed: all of the output but what was printed before.
function run(    line, n) {
  printf "%s", typed > "replay.gw"
  close("replay.gw")
  system("LC_ALL=C.UTF-8 \"$GASWRIGHT\" --keep-going - < replay.gw > replay.out 2>&1")
  n = 0
  while ((getline line < "replay.out") > 0)
    if (++n > before)
      print to_roff(line)
  close("replay.out")
  before = n
}

index($0, begin) == 1 && !inside { inside = 1; block = 0; typed = ""; before = 0; session = 0; print; next }
index($0, end) == 1 && inside { inside = 0; print; next }
!inside { print; next }
/^> / {
  session = 1
  typed = typed from_roff(substr($0, 3)) "\n"
  print
  # A block says nothing before its end.
  if ($0 ~ /^> (balance|sheet) / && $0 !~ /; *end/)
    block = 1
  if ($0 ~ /^> end$/)
    block = 0
  if ($0 !~ /([,\\]|\\e)$/ && !block)
    run()
  next
}
!session
