"""What the tests of whole sessions share: running the program, its answers, folders, and TAP."""
import json
import math
import os
import shutil
import subprocess
import sys
import tempfile

TOP = os.path.dirname(os.path.dirname(os.path.dirname(os.path.abspath(__file__))))


def program():
    """The program under test."""
    return os.path.abspath(os.environ.get("GASWRIGHT", "./gaswright"))


def run(statements, form="json", options=(), locale=None):
    """Runs STATEMENTS, a text; gives status, standard output and standard error."""
    environment = dict(os.environ)
    if locale is not None:
        environment.update(LC_ALL=locale)
    done = subprocess.run([program(), "--format", form, "--keep-going", *options],
                          input=statements.encode(), stdout=subprocess.PIPE,
                          stderr=subprocess.PIPE, env=environment, check=False)
    if done.returncode not in (0, 1):
        print("Bail out! gaswright ended with %d: %s" % (done.returncode, done.stderr.decode()))
        sys.exit(99)
    return done.returncode, done.stdout.decode(), done.stderr.decode()


def unfolded(text):
    """TEXT as one line: where lines are folded does not count."""
    return " ".join(text.split())


def unfolded_lines(text):
    """The lines of TEXT, each with what was folded below it."""
    lines = []
    for line in text.splitlines():
        if line.startswith(" " * 10) and lines and lines[-1]:
            lines[-1] += " " + line.strip()
        else:
            lines.append(line)
    return lines


def answers(statements, options=()):
    """The objects that STATEMENTS answer with, in their order."""
    return [json.loads(line) for line in run(statements, "json", options)[1].splitlines()]


def figures(objects):
    """Label (or subject, without one) of every answer: the answer and its object."""
    found = {}
    for thing in objects:
        for answer in thing.get("answers", []):
            name = answer.get("label", answer["what"])
            if name in found:
                raise ValueError("two answers are called " + name)
            found[name] = (answer, thing)
    return found


def faults(objects):
    """The errors among OBJECTS, as lines to show."""
    return ["%s: %s" % (thing["statement"], thing["error"]["message"])
            for thing in objects if "error" in thing]


def off(got, want, tol, kind="rel"):
    """How far GOT is from WANT, as a line to show; empty if within TOL, relative or absolute."""
    bound = tol * (abs(want) if kind == "rel" else 1)
    if isinstance(got, (int, float)) and math.isfinite(got) and abs(got - want) <= bound:
        return ""
    return "got %r, not %r within %g (%s)" % (got, want, tol, kind)


def rows(name):
    """The rows of a table beside the tests: a dictionary each, by the names of the first line."""
    with open(os.path.join(TOP, "tests", name), encoding="utf-8") as file:
        lines = [line.rstrip("\n").split("\t") for line in file if not line.startswith("#")]
    heading, body = lines[0], lines[1:]
    for cells in body:
        if len(cells) != len(heading):
            raise ValueError("%s: %d cells in: %s" % (name, len(cells), "\t".join(cells)))
    return [dict(zip(heading, cells)) for cells in body]


def read(name):
    """A file beside the tests."""
    with open(os.path.join(TOP, "tests", name), encoding="utf-8") as file:
        return file.read()


class Tap:
    """Results, one line each, and what is wrong under those that are not good."""

    def __init__(self):
        self.count = 0
        self.failed = 0

    def tell(self, wrong, name):
        """Good if WRONG, a text or a list of lines, is empty."""
        if isinstance(wrong, str):
            wrong = [wrong] if wrong else []
        self.count += 1
        self.failed += bool(wrong)
        print("%s %d - %s" % ("not ok" if wrong else "ok", self.count, name))
        for line in wrong[:20]:
            print("#   " + line.replace("\n", "\n#   "))
        if len(wrong) > 20:
            print("#   and %d more" % (len(wrong) - 20))

    def finish(self):
        """The plan; the status to end with."""
        print("1..%d" % self.count)
        return 1 if self.failed else 0


class Folder:
    """A folder of its own for a session, gone afterwards."""

    def __enter__(self):
        self.path = tempfile.mkdtemp()
        return self

    def __exit__(self, *unused):
        shutil.rmtree(self.path)

    def run(self, statements, *arguments, form="json", **variables):
        """Exit status, answers and complaints of a run in it, with VARIABLES in its environment."""
        done = subprocess.run([program(), "--format", form, *arguments],
                              input=statements.encode(), cwd=self.path, stdout=subprocess.PIPE,
                              stderr=subprocess.PIPE, check=False,
                              env=dict(os.environ, **variables))
        return done.returncode, done.stdout.decode(), done.stderr.decode()

    def at(self, name):
        return os.path.join(self.path, name)

    def read(self, name):
        with open(self.at(name), encoding="utf-8") as file:
            return file.read()

    def write(self, name, text):
        with open(self.at(name), "w", encoding="utf-8") as file:
            file.write(text)

    def names(self):
        return sorted(os.listdir(self.path))
