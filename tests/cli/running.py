"""Runs the program as a person does and says what came of it."""
import dataclasses
import fcntl
import json
import os
import pathlib
import pty
import select
import struct
import subprocess
import termios
import time

TINCTURE = pathlib.Path(os.environ.get("TINCTURE", "tincture-is-not-set")).resolve()
PROJECT = pathlib.Path(__file__).resolve().parents[2]
FILES = ("reduced.png", "swatches.csv", "swatches.svg", "swatches.png", "swatches.tokens.json", "curve.csv",
         "curve.svg", "study.json")
MANIFEST = "manifest.json"
TIMEOUT = 300  # seconds; a run that hangs fails, one on a busy machine does not


def sanitized():
    """Whether the program was built with AddressSanitizer, which takes memory of its own."""
    return b"__asan_init" in TINCTURE.read_bytes()


def environment(**changes):
    """Ours, without what changes how a terminal is used; a change to None unsets."""
    env = {**os.environ, "NO_COLOR": None, "LC_ALL": None, "LC_CTYPE": None, "TERM": "xterm-256color",
           "LANG": "C.UTF-8", **changes}
    return {name: value for name, value in env.items() if value is not None}


@dataclasses.dataclass
class Result:
    status: int
    out: str
    err: str


def run(*arguments, cwd, before=(), env=None, **options):
    """`before` goes in front of the program, such as an emulator."""
    done = subprocess.run([*before, TINCTURE, *arguments], cwd=cwd, env=env or environment(), stdin=subprocess.DEVNULL,
                          capture_output=True, timeout=TIMEOUT, **options)
    return Result(done.returncode, done.stdout.decode(), done.stderr.decode())


def reduce(picture, *options, cwd, out="out", **more):
    """Runs `reduce` into `cwd`/`out`, which must go well, and returns that folder."""
    result = run("reduce", picture, "--out", out, "--quiet", *options, cwd=cwd, **more)
    assert (result.status, result.out, result.err) == (0, "", ""), result
    return pathlib.Path(cwd) / out


def study_of(folder):
    return json.loads((folder / "study.json").read_text(encoding="utf-8"))


def contents(folder):
    """Every file below a folder with its bytes."""
    return {str(p.relative_to(folder)): p.read_bytes() for p in sorted(folder.rglob("*")) if p.is_file()}


def names_in(folder):
    """Everything below a folder, hidden or not."""
    return sorted(str(p.relative_to(folder)) for p in pathlib.Path(folder).rglob("*"))


class Screen:
    """A pseudo-terminal and what was written to it."""

    def __init__(self, columns):
        self.master, self.slave = pty.openpty()
        fcntl.ioctl(self.slave, termios.TIOCSWINSZ, struct.pack("HHHH", 50, columns, 0, 0))
        self.data = b""

    def read(self):
        try:
            self.data += os.read(self.master, 65536)
        except OSError:  # the last writer is gone
            return False
        return True

    def text(self):
        return self.data.decode(errors="replace").replace("\r\n", "\n")


class Terminal:
    """A running program with screens for the streams that are named ("out", "err"), pipes else."""

    def __init__(self, *arguments, cwd, screens=("out", "err"), columns=80, env=None):
        self.screens = {name: Screen(columns) for name in screens}
        streams = {"std" + name: screen.slave for name, screen in self.screens.items()}
        for name in {"out", "err"} - set(screens):
            streams["std" + name] = subprocess.PIPE
        self.process = subprocess.Popen([TINCTURE, *arguments], cwd=cwd, env=env or environment(),
                                        stdin=subprocess.DEVNULL, start_new_session=True, **streams)
        for screen in self.screens.values():
            os.close(screen.slave)

    def read_until(self, enough):
        """Reads the screens until enough() or the end of the program."""
        end = time.monotonic() + TIMEOUT
        open_ones = list(self.screens.values())
        while open_ones and not enough():
            assert time.monotonic() < end, "the program hangs"
            ready, _, _ = select.select([s.master for s in open_ones], [], [], 0.02)
            open_ones = [s for s in open_ones if s.master not in ready or s.read()]

    def finish(self):
        self.read_until(lambda: False)
        out, err = self.process.communicate(timeout=TIMEOUT)
        for screen in self.screens.values():
            os.close(screen.master)
        text = {name: screen.text() for name, screen in self.screens.items()}
        return Result(self.process.returncode, text.get("out", (out or b"").decode()),
                      text.get("err", (err or b"").decode()))


def run_in_terminal(*arguments, cwd, **options):
    return Terminal(*arguments, cwd=cwd, **options).finish()
