"""The same statements at terminals of several widths: no line is wider than the terminal or than
100 characters, and nothing but the places where lines are folded differs."""
import fcntl
import os
import pty
import struct
import subprocess
import sys
import termios

import session

STATEMENTS = session.read("sessions/contract.gw") + "".join(
    session.read("sessions/scenarios/%s.gw" % name)
    for name in ("p01", "p09", "p11", "p13", "p16", "p17", "p23"))


def shown(columns):
    """What a terminal of so many columns shows; 0: no terminal."""
    if not columns:
        return session.run(STATEMENTS, "text", locale="C.UTF-8")[1]
    screen, terminal = pty.openpty()
    fcntl.ioctl(terminal, termios.TIOCSWINSZ, struct.pack("HHHH", 24, columns, 0, 0))
    settings = termios.tcgetattr(terminal)
    settings[1] &= ~termios.OPOST
    termios.tcsetattr(terminal, termios.TCSANOW, settings)
    with subprocess.Popen([session.program(), "--keep-going", "--color=never", "-"],
                          stdin=subprocess.PIPE, stdout=terminal, stderr=subprocess.DEVNULL,
                          env=dict(os.environ, LC_ALL="C.UTF-8")) as run:
        os.close(terminal)
        if not os.fork():                # the terminal is read while the statements are written
            run.stdin.write(STATEMENTS.encode())
            run.stdin.close()
            os._exit(0)
        run.stdin.close()
        read = b""
        while True:
            try:
                piece = os.read(screen, 1 << 16)
            except OSError:              # Linux: the other end is closed
                break
            if not piece:
                break
            read += piece
    os.wait()
    os.close(screen)
    return read.decode()


def words(text):
    """All but blanks, and the lines of tabs, which are as long as there is room.  A card that is set
    in bands says its names and headings in each: of cards every word counts once."""
    return ["".join(sorted(set(part.split())) if "_/" in part else part.split()).replace("_", "")
            for part in text.split("\n\n")]


def main():
    tap = session.Tap()
    plain = shown(0)
    tap.tell([line for line in plain.splitlines() if len(line) > 100],
             "without a terminal no line is wider than 100")
    for columns in (60, 80, 100, 140):
        text = shown(columns)
        most = min(columns, 100)
        tap.tell([line for line in text.splitlines() if len(line) > most],
                 "no line is wider than %d at %d columns" % (most, columns))
        if columns >= 80:
            tap.tell("" if words(text) == words(plain) else "they differ",
                     "the words at %d columns are those without a terminal" % columns)
    tap.tell("" if shown(140) == plain else "they differ", "a wide terminal shows lines of 100")
    return tap.finish()


sys.exit(main())
