"""Pictures of balances and streams: what `show NAME as picture` writes.

Pictures are read by an XML parser.  Figures in them are held against those the program answers with,
and labels against each other: letters are taken at the widths of Helvetica (Adobe Font Metrics,
4.1), a common stand-in for whatever sans-serif face draws them."""
import json
import os
import re
import sys
import xml.etree.ElementTree

from session import TOP, Folder, Tap

SVG = "{http://www.w3.org/2000/svg}"
OPEN = """\
balance half
separate membrane: feed = sweet + tail
known feed = 850 Nm3/h of (CH4 60, CO2 40 mol%)
known CH4 of sweet = 97 mol%
end
show half as picture "half.svg"
"""
ODD = """\
gas lean = CH4 10, CO2 90 mol%
stream "a<b & c" = 100 kg/h of lean
stream "d'e" = 40 % of "a<b & c"
show "d'e" in kg/h as picture "odd.svg"
"""
CLASH = """\
balance clash
mix tee: a + b = c
known a = 10 kmol/h of CH4
known b = 20 kmol/h of CH4
known c = 50 kmol/h
end
show clash as picture "clash.svg"
"""
REACTS = """\
balance burn
components CH4, O2, N2, CO2, H2O
react burner: fuel + air = flue with CH4 + 2 O2 = CO2 + 2 H2O
known fuel = 10 kmol/h of CH4
known air = 120 kmol/h of (O2 21, N2 79 mol%)
known conversion of CH4 in burner = 100 %
end
show burn in kg/h as picture "burn.svg"
"""
BLEND = """\
stream one = 30 kg/h of CH4
stream two = 20 kg/h of CO2
stream three = one + two
stream four = 25 % of three
stream five = three - four
stream apart = 5 kg/h of N2
"""


def texts(root):
    return ["".join(text.itertext()) for text in root.iter(SVG + "text")]


def drawn(statements, name, *arguments):
    """The picture of a session, as a tree."""
    with Folder() as folder:
        status, _, err = folder.run(statements, *arguments)
        if status != 0 or folder.names() != [name]:
            raise SystemExit("%s: %s %s" % (name, folder.names(), err))
        return xml.etree.ElementTree.parse(folder.at(name)).getroot()


def missing(root, *pieces):
    """Which of PIECES stand nowhere in the picture."""
    said = "\n".join(texts(root))
    return ["no '%s' in:\n%s" % (piece, said) for piece in pieces if piece not in said]


def letter(char):
    """Its width in thousandths of the size: Helvetica, the broadest of its kind."""
    if char in "ijl.,:;'|/ft() ":
        return 333
    return 833 if char in "mMWw%±@" else 667 if char.isupper() else 584


def boxes_of(root):
    """What each text covers, at least: left, top, right, bottom, the text."""
    found = []
    for text in root.iter(SVG + "text"):
        said, size = "".join(text.itertext()), float(text.get("font-size", 12))
        width = sum(map(letter, said)) * size / 1000
        x, y = float(text.get("x")), float(text.get("y"))
        anchor = text.get("text-anchor", "start")
        x -= {"start": 0, "middle": 0.5, "end": 1}[anchor] * width
        found.append((x, y - 0.72 * size, x + width, y + 0.1 * size, said))
    return found


def overlaps(root):
    found = boxes_of(root)
    width, height = float(root.get("width")), float(root.get("height"))
    wrong = ["'%s' and '%s'" % (a[4], b[4]) for i, a in enumerate(found) for b in found[:i]
             if a[0] < b[2] and b[0] < a[2] and a[1] < b[3] and b[1] < a[3]]
    return wrong + ["'%s' leaves the paper" % one[4] for one in found
                    if one[0] < 0 or one[2] > width or one[1] < 0 or one[3] > height]


def demo(tap):
    for name, pieces in (
            ("upgrading", ["850 Nm3/h", "CH4 60, CO2 38.5 mol%", "purge-tee", "splits", "mixes",
                           "separates", "flows in Nm3/h (ideal-gas Nm3, at 0 degC, 101.325 kPa)",
                           "COMPLETE", "mass in and out"]),
            ("header", ["±", "one standard uncertainty", "RECONCILED", "THEY DO NOT AGREE"])):
        with open("%s/tables/demo/%s.gw" % (TOP, name), encoding="utf-8") as file:
            root = drawn(file.read(), name + ".svg")
        tap.tell(missing(root, *pieces), "the %s of the demo says what it shows" % name)
        tap.tell(overlaps(root), "and none of its labels hides another")
        head = [root.find(SVG + tag) for tag in ("title", "desc")]
        tap.tell([] if all(one is not None and one.text for one in head) else "no title or desc",
                 "it has a title and a description")


def figures(tap):
    """In the picture as in the answers, to five digits."""
    with open(TOP + "/tables/demo/upgrading.gw", encoding="utf-8") as file:
        typed = file.read()
    names = ["biogas", "recycle", "mixed", "sweet", "rich", "vent"]
    asked = typed.replace("show upgrading in Nm3/h", "show upgrading in kg/h")
    with Folder() as folder:
        _, out, _ = folder.run(asked + "".join("%s in kg/h\n" % n for n in names if n != "biogas"))
        said = texts(xml.etree.ElementTree.parse(folder.at("upgrading.svg")).getroot())
    want = {a["what"]: a["value"] for line in out.splitlines()
            for a in json.loads(line)["answers"] if a["unit"] == "kg/h" and "label" not in a}
    wrong = []
    for name, value in want.items():
        at = [i for i, text in enumerate(said) if text == name]
        near = [m for i in at for m in re.findall(r"^([0-9.]+) kg/h$", said[i - 1])]
        if len(near) != 1 or abs(float(near[0]) / value - 1) > 5.1e-5:
            wrong.append("%s: %s, not %g" % (name, near, value))
    tap.tell(wrong or ([] if len(want) == 5 else str(want)), "flows are those asked for")


def kinds(tap):
    root = drawn(OPEN, "half.svg")
    tap.tell(missing(root, "850 Nm3/h", "sweet", "CH4 97, CO2 3 mol%", "SHORT BY 1", "pale")
             + [text for text in texts(root) if text.count("Nm3/h") and "850" not in text
                and "flows in" not in text], "an open flow has no figure")
    root = drawn(CLASH, "clash.svg")
    tap.tell(missing(root, "CLASH", "a", "b", "c") + [t for t in texts(root) if "kmol/h" in t
                                                     and "flows in" not in t],
             "nor has one of a clash")
    root = drawn(REACTS, "burn.svg")
    tap.tell(missing(root, "reacts", "burner", "160.43 kg/h", "3462.1 kg/h", "3622.5 kg/h"),
             "a reaction is drawn as one")
    root = drawn(ODD, "odd.svg")
    tap.tell(missing(root, "a<b & c", "d'e", "40 kg/h", "rest of a<b & c"), "names are escaped")
    root = drawn(BLEND + 'show five in kg/h as picture "five.svg"\n', "five.svg")
    tap.tell(missing(root, "Stream five", "one", "two", "30 kg/h", "20 kg/h", "50 kg/h",
                     "12.5 kg/h", "37.5 kg/h", "blends", "splits", "apart by rounding alone")
             + [t for t in texts(root) if t == "apart"],
             "a stream is drawn with all it is made of, and nothing else")
    root = drawn(BLEND + 'show three as picture "three.svg"\n', "three.svg")
    tap.tell(missing(root, "kmol/h") + [t for t in texts(root) if t == "five"],
             "but not with what is made of it")


def written(tap):
    show = BLEND + 'show three as picture "p.svg"\n'
    with Folder() as folder:
        status, out, _ = folder.run(show)
        said = [json.loads(line) for line in out.splitlines()]
        tap.tell([] if status == 0 and any("picture written to p.svg" in n for one in said
                                           for n in one["notes"]) else out, "JSON says so too")
        with open(folder.at("p.svg"), encoding="utf-8") as file:
            before = file.read()
        os.unlink(folder.at("p.svg"))
        folder.run(show, form="csv")
        with open(folder.at("p.svg"), encoding="utf-8") as file:
            tap.tell([] if file.read() == before else "another", "it is the same in CSV")
        with open(folder.at("run.svg"), "w", encoding="utf-8") as file:
            file.write(show.replace("p.svg", "./run.svg"))
        status, _, err = folder.run("", "run.svg")
        with open(folder.at("run.svg"), encoding="utf-8") as file:
            tap.tell([] if status == 1 and "it is an input" in err and file.read().startswith(
                "stream one") else err, "what runs is not written over")
        with open(folder.at("in.svg"), "w", encoding="utf-8") as file:
            file.write(BLEND)
        status, _, err = folder.run('open "in.svg"\nshow three as picture "in.svg"\n')
        with open(folder.at("in.svg"), encoding="utf-8") as file:
            tap.tell([] if status == 1 and "it is an input" in err and file.read() == BLEND
                     else err, "nor what was opened")
        os.mkdir(folder.at("taken.svg"))
        status, out, err = folder.run(show.replace("p.svg", "taken.svg"))
        tap.tell([] if status == 1 and "taken.svg" in out + err and folder.names() == [
            "in.svg", "p.svg", "run.svg", "taken.svg"] and not os.listdir(folder.at("taken.svg"))
                 else [err, str(folder.names())], "what cannot be written leaves nothing")


def in_notes(tap):
    with Folder() as folder:
        folder.run(REACTS.replace('show burn in kg/h as picture "burn.svg"', 'solve burn')
                   + 'note "n.html"\n')
        with open(folder.at("n.html"), encoding="utf-8") as file:
            page = file.read()
    tap.tell([] if "Balance burn" in page and "reacts" in page else "no picture",
             "a note has the picture of its balance")


def main():
    tap = Tap()
    demo(tap)
    figures(tap)
    kinds(tap)
    written(tap)
    in_notes(tap)
    return tap.finish()


if __name__ == "__main__":
    sys.exit(main())
