"""Calculation notes: what `note` writes, and that it can be run again.

The figures of a note are held against those of its own statements run afresh; the two forms of a
note against each other; HTML against a parser by the standard and against a checker, where they are
installed; pictures against an XML parser."""
import html.parser
import os
import re
import shutil
import subprocess
import sys
import xml.etree.ElementTree

import session
from session import Tap

SESSION = """\
gas raw = CH4 58.2 ± 0.3, CO2 rest, N2 1.4, O2 0.4, H2S 850 ppm mol% dry  # as analysed
gas "a<b & |c|" = CH4 60, CO2 40 mol%
stream feed = 850 Nm3/h ± 2 % of raw at 38 degC, 25 mbar(g), saturated
stream mix = feed + 120 kg/h of C3H8 at 15 degC, 2 bar(g)
stream purge = 5 % of mix
stream product = mix - purge
feed in kg/h, m3/h
set site pressure 0.98 bar
wobbe of product in MJ/m3
let spoilt = 3 kg; undo
density of raw at 20 degC, 5 bar(g)
1 Nm3/h of "a<b & |c|" in kg/h
"""

SECTIONS = ["Given", "Reference states", "Results", "Assumptions and their weight", "Notes",
            "Cautions", "Workings", "Sources", "Statements", "Signatures"]


class Folder(session.Folder):
    """One in which runs go on after a failure, at a fixed time."""

    def run(self, statements, *arguments, form="text", epoch="86400"):
        return super().run(statements, "--keep-going", *arguments, form=form,
                           SOURCE_DATE_EPOCH=epoch, TZ="Asia/Tokyo")


class Cells(html.parser.HTMLParser):
    """The texts of a page: headings, cells and items in order, the statements, the pictures."""

    def __init__(self, page):
        super().__init__()
        self.cells, self.code, self.inside, self.depth = [], "", None, 0
        self.feed(page)

    def handle_starttag(self, tag, attrs):
        self.depth += tag == "svg"
        if tag in ("th", "td", "h1", "h2", "h3", "li") and not self.depth:
            self.cells.append("")
            self.inside = tag
        elif tag == "pre":
            self.inside = tag

    def handle_endtag(self, tag):
        self.depth -= tag == "svg"
        if tag == self.inside:
            self.inside = None

    def handle_data(self, data):
        if self.inside == "pre":
            self.code += data
        elif self.inside and not self.depth:
            self.cells[-1] += data


def markdown_cells(text):
    """The same of Markdown."""
    def plain(cell):
        return re.sub(r"\\(.)", r"\1", cell.strip())

    cells, code = [], ""
    for line in text.split("\n"):
        if line.startswith("    "):
            code += line[4:] + "\n"
        elif line.startswith("|"):
            row = re.split(r"(?<!\\)\|", line)[1:-1]
            if any(cell.strip(" -") for cell in row) or "---" not in line:
                cells += [plain(cell) for cell in row]
        elif line.startswith("#"):
            cells.append(plain(line.lstrip("#")))
        elif line.startswith("- "):
            cells.append(plain(line[2:]))
    return cells, code


def figures(folder, statements):
    """The values that statements answer with."""
    out = folder.run(statements, form="json")[1]
    return re.findall(r'"value":([^,]+),"unit":"([^"]*)"', out)


def both_forms(tap):
    with Folder() as folder:
        status, out, err = folder.run(SESSION + 'note "n.md"\nnote "n.html"\n')
        tap.tell(err, "a note is written")
        tap.tell([] if status == 0 and "calculation note written to n.md" in out else out,
                 "and said to be")
        tap.tell([] if folder.names() == ["n.html", "n.md"] else folder.names(),
                 "nothing is left beside it")
        note, page = folder.read("n.md"), folder.read("n.html")
        cells, code = markdown_cells(note)
        there = Cells(page)
        differ = ["%r, not %r" % pair for pair in zip(cells, there.cells) if pair[0] != pair[1]]
        tap.tell(differ or ([] if len(cells) == len(there.cells) > 100 else "lengths"),
                 "both forms say the same")
        tap.tell([] if code == there.code else [code, there.code], "and have the same statements")
        tap.tell([] if [c for c in cells if c in SECTIONS] == SECTIONS else cells,
                 "sections stand in order")
        wanted, got = figures(folder, SESSION), figures(folder, code)
        tap.tell([] if wanted == got and len(wanted) == 5 else [repr(wanted), repr(got)],
                 "its statements give the same figures again")
        told = [cell for cell in cells if cell.endswith(" kg/h") and cell.startswith("10")]
        tap.tell([] if any(cell.startswith("1018 ") for cell in told) else told,
                 "results are among them")
        tap.tell([] if "1970-01-02, gaswright" in note else note[:200],
                 "the day is that of SOURCE_DATE_EPOCH")
        tap.tell([] if "a<b &" not in page and "a&lt;b &amp; |c|" in page else "not escaped",
                 "names are escaped")
        tap.tell([] if not re.search(r"https?://(?!www\.w3\.org/)|<script|<link|src=", page)
                 else "something from outside", "the page stands by itself")
        valid(tap, folder, page)
        pictures(tap, page)


def valid(tap, folder, page):
    checked = subprocess.run(
        ["/usr/bin/python3", "-c",
         "import html5lib, sys\nhtml5lib.HTMLParser(strict=True).parse(sys.stdin.read())"],
        input=page.encode(), stderr=subprocess.PIPE, check=False) \
        if os.path.exists("/usr/bin/python3") else None
    if checked is None or b"ModuleNotFoundError" in checked.stderr:
        tap.tell("", "the page is HTML5 # SKIP no html5lib")
    else:
        tap.tell(checked.stderr.decode(), "the page is HTML5")
    if shutil.which("tidy") is None:
        tap.tell("", "nothing to tidy # SKIP no tidy")
        return
    done = subprocess.run(["tidy", "-q", "-e", os.path.join(folder.path, "n.html")],
                          stderr=subprocess.PIPE, check=False)
    tap.tell(done.stderr.decode(), "nothing to tidy")


def pictures(tap, page):
    drawn = re.findall(r"<svg.*?</svg>", page, re.S)
    wrong = []
    for picture in drawn:
        try:
            root = xml.etree.ElementTree.fromstring(picture)
        except xml.etree.ElementTree.ParseError as error:
            wrong.append(str(error))
            continue
        wrong += [] if root.find("{http://www.w3.org/2000/svg}title") is not None else ["no title"]
    tap.tell(wrong or ([] if len(drawn) == 2 else str(len(drawn))), "pictures are well formed")
    texts = " ".join(re.findall(r"<text[^>]*>([^<]*)</text>", "".join(drawn)))
    tap.tell([piece for piece in ("CH4 58.20 %", "mix", "purge", "apart by rounding alone",
                                  "lines as wide as the flows") if piece not in texts],
             "they show compositions, streams, basis and closure")
    widths = {}
    for name in ("purge", "product"):
        found = re.search(r"<path d=\"([^\"]*)\"[^>]*?(?:stroke-width=\"([0-9.]+)\")?[^>]*>"
                          r"<title>%s[^<]*</title>" % name, "".join(drawn))
        widths[name] = found is not None
    tap.tell([name for name, there in widths.items() if not there], "lines say which they are")


def inputs(tap):
    with Folder() as folder:
        folder.write("run.md", 'gas a = CH4 100 mol%\n1 kg of a in mol\nnote "run.md"\n')
        before = folder.read("run.md")
        status, _, err = folder.run("", "run.md")
        tap.tell([] if status == 1 and "it is an input" in err and folder.read("run.md") == before
                 else err, "the file that runs is not written over")
        folder.write("lab.md", "component,amount\nCH4,60\nCO2,40\n")
        folder.write("part.html", "let q = 3 kg\n")
        _, _, err = folder.run('open "part.html"\nnote "part.html"\n')
        tap.tell([] if "it is an input" in err and folder.read("part.html") == "let q = 3 kg\n"
                 else err, "a file that was opened is not written over")
        _, _, err = folder.run('gas lab from "lab.md" mol%\nnote "./lab.md"\n')
        tap.tell([] if "it is an input" in err else err, "nor is an analysis")
        _, _, err = folder.run('1 kg in lb\nnote "no/such/folder.md"\n2 kg in lb\n')
        tap.tell([] if "no/such/folder.md" in err else err, "what cannot be written is said")
        folder.write("old.md", "old\n")
        os.chmod(os.path.join(folder.path, "old.md"), 0o600)
        folder.run('1 kg in lb\nnote "old.md"\n')
        mode = os.stat(os.path.join(folder.path, "old.md")).st_mode & 0o777
        tap.tell([] if "Calculation note: old" in folder.read("old.md") and mode == 0o600
                 else folder.read("old.md"), "an old note is replaced, its rights kept")


def odds(tap):
    with Folder() as folder:
        folder.run('note "empty.md"\n')
        text = folder.read("empty.md")
        tap.tell([] if "Nothing was asked." in text and "Nothing was defined." in text else text,
                 "a note of nothing says so")
        folder.write("bad.gw", "let q = 3 kg\nlet r = 4 barr\n")
        folder.write("good.gw", "let g = 3 kg\n")
        folder.run('open "bad.gw"\nopen "good.gw"\ng in lb\nnote "n.md"\n')
        code = markdown_cells(folder.read("n.md"))[1]
        tap.tell([] if code == "let g = 3 kg\ng in lb\n" else code,
                 "a file that was opened stands with what it held, one that failed does not")
        many = "".join("%d kg in lb\n" % i for i in range(1, 2101))
        folder.run(many + 'note "n.md"\n')
        text = folder.read("n.md")
        tap.tell([] if "Left out: 1600 results" in text and "Left out: 100 statements" in text
                 else text[-300:], "what is left out is counted")
        folder.run("sheet offer of air; inlet: 1057 ft3/min at 32 degC; duty: 1000 scfm; end\n"
                   'check offer\n1 kg in lb\nnote "n.html"\n')
        code = Cells(folder.read("n.html")).code
        status, _, err = folder.run(code)
        tap.tell([] if status == 0 and "duty" in code else code + err, "blocks can be run again")


def coverage(tap):
    """850 kg/h ± 2 % is 17 kg/h, standard; the heading says what stands below it."""
    with Folder() as folder:
        folder.run("850 kg/h ± 2 % of CO2 in kg/h\nset coverage 2\n850 kg/h ± 2 % of N2 in kg/h\n"
                   '1 kg in lb\nnote "n.md"\n')
        text = folder.read("n.md").split("## Results")[1].split("\n## ")[0]
        first, second, third = text.split("\n### ")[1:4]
        tap.tell([] if "| standard uncertainty |" in first and "| 17 |" in first
                 and "| expanded uncertainty (k=2) |" in second and "| 34 |" in second
                 and "| standard uncertainty |" in third else text,
                 "a note says which uncertainty it prints")


def checks(tap):
    """A check in a note: the stated figure and what would explain it."""
    with Folder() as folder:
        folder.run('check 86 Nm3/h of CO2 against 160 kg/h\ncheck 1 kg/h of CO2 against 1 kg/h\n'
                   'note "n.md"\n')
        cells = markdown_cells(folder.read("n.md"))[0]
        tap.tell([] if "160.000 kg/h" in cells and cells.count("read otherwise") >= 6
                 and "agrees under a reading below" in cells
                 and "agrees with what is computed" in cells else cells,
                 "a check has its stated figure and its readings")


def balances(tap):
    """A balance in a note: the verdict, the clash or what is open, and compositions."""
    blend = ("balance blend; mix header: a + b = c; known a = 60 kmol/h of (CO2 10, N2 rest mol%); "
             "known b = 40 kmol/h of (CO2 35, N2 rest mol%); ")
    cases = (
        ("end; solve", ("COMPLETE", "100.000 kmol/h", "CO2 20, N2 80 mol%")),
        ("known c = 100 kmol/h; known CO2 of c = 22 mol%; end; solve",
         ("CLASH: around header, CO2 is out by -2 kmol/h (in less out)",
          "known CO2 of c = 22 mol%", "alone at fault, it would have to be: 20 mol%")),
    )
    with Folder() as folder:
        for lines, pieces in cases:
            folder.run('%s%s\nnote "n.md"\n' % (blend, lines))
            cells = markdown_cells(folder.read("n.md"))[0]
            tap.tell([one for one in pieces if not any(one in cell for cell in cells)],
                     "a note has what a balance came to: " + pieces[0])
        folder.run("balance tee; split fork: a = b + c; known a = 9 kmol/h of CO2; end; solve\n"
                   'note "n.md"\n')
        cells = markdown_cells(folder.read("n.md"))[0]
        tap.tell([] if "SHORT BY 1" in cells and cells.count("open") == 2 else cells,
                 "a note says which flows are open")


def analyses(tap):
    """A gas from a file: the note has the figures of the file, as a list that can be typed."""
    with Folder() as folder:
        folder.write("lab.csv", "component;mol% dry;U (k=2)\nCH4;58,31;0,50\nCO2;39,1;\n"
                                "H2S;850 ppm;\nO2;<0,02;\nN2;rest;\n")
        ask = "CH4 of lab in mol%\nN2 of lab in mol%\n"
        wanted = figures(folder, 'gas lab from "lab.csv"\n' + ask)
        folder.run('gas lab from "lab.csv"\n' + ask + 'note "n.md"\n')
        cells = markdown_cells(folder.read("n.md"))[0]
        read = cells[cells.index("lab, as read") + 1] if "lab, as read" in cells else ""
        tap.tell([] if read == "CH4 58.31 ± 0.50 (k=2), CO2 39.1, H2S 850 ppm, O2 <0.02, N2 rest "
                 "mol% dry" else cells, "a note has what a file said")
        got = figures(folder, "gas lab = %s\n%s" % (read, ask))
        tap.tell([] if wanted == got and len(got) == 2 else [repr(wanted), repr(got)],
                 "and typed it gives the same figures")


def main():
    tap = Tap()
    analyses(tap)
    balances(tap)
    both_forms(tap)
    inputs(tap)
    odds(tap)
    checks(tap)
    coverage(tap)
    return tap.finish()


if __name__ == "__main__":
    sys.exit(main())
