"""What a person sees: colours and blocks where the terminal has them, progress, and a clean end."""
import json
import os
import re
import signal
import time
import unicodedata

import pytest

import pictures
from running import Terminal, environment, names_in, run, run_in_terminal, study_of

# Many counts on one thread: work that lasts well over half a second, when progress begins to show.
SLOWLY = ("--threads", "1", "--at-most", "128")
VERY_SLOWLY = ("--threads", "1", "--at-most", "256")

ESCAPE = re.compile(r"\x1b\[[0-9;?]*[A-Za-z]")
BLOCKS = re.compile("[\u2580-\u259f]")


@pytest.fixture
def place(tmp_path):
    pictures.save_png(tmp_path / "p.png", pictures.poster(), dpi=(300, 300))
    return tmp_path


def summary(place, *options, **more):
    result = run_in_terminal("reduce", "p.png", "--force", *options, cwd=place, **more)
    assert result.status == 0
    return result.out


def check_content(text, study):
    """The picture, the proposal, every swatch and every count, in words."""
    plain = ESCAPE.sub("", text)
    words = " ".join(plain.split())
    assert "p.png" in plain and "160 x 120" in plain
    assert study["proposal"]["sentence"] in words
    for colour in next(p["colours"] for p in study["palettes"] if p["count"] == study["count"]):
        assert colour["hex"] in plain and colour["name"] in words
        assert f"{100 * colour['share']:.1f}" in plain
    for point in study["curve"]:
        if 2 <= point["count"] <= 24:
            assert re.search(rf"^\s*{point['count']}\s.*\b{point['p95_de00']:.1f}\b", plain, re.M), point
    check_steps(words, study)
    assert "p-tincture" in words


def check_steps(words, study):
    """What one colour fewer costs, from one above the count that is used to three below."""
    for point in study["curve"]:
        loss, count = point["loss"], point["count"]
        shown = re.search(rf"\b{count + 1} (→|>) {count}\b.*", words)
        assert bool(shown) == (loss is not None and study["count"] - 3 <= count <= study["count"]), count
        if shown:
            step = re.split(r"\d+ (?:→|>) \d+|In the folder", shown.group()[len(f"{count + 1} > {count}") :])[0]
            for part in (loss["colour"]["name"], "into " + loss["into"]["name"], f"{100 * loss['share']:.1f} %",
                         f"{loss['mean_de00']:.1f}", f"{loss['max_de00']:.1f}"):
                assert part in step, (part, step)
            assert loss["into_share"] > 0.995 or f"({100 * loss['into_share']:.0f} %)" in step


@pytest.mark.parametrize("columns", [40, 80, 120])
def test_a_terminal_gets_colours_and_no_line_is_broken(place, columns):
    text = summary(place, columns=columns)
    study = study_of(place / "p-tincture")
    check_content(text, study)
    for colour in next(p["colours"] for p in study["palettes"] if p["count"] == study["count"]):
        r, g, b = (int(colour["hex"][i : i + 2], 16) for i in (1, 3, 5))
        assert f"\x1b[48;2;{r};{g};{b}m" in text
    assert bool(BLOCKS.search(text)) == (columns > 40), "bars where there is room"
    assert "◂ proposed" in text if columns > 40 else "▴ proposed" in text, "beside the bar where there is room"
    lines = ESCAPE.sub("", text).split("\n")
    assert max(map(len, lines)) <= columns
    assert text.count("\x1b[0m") >= text.count("\x1b[48;")
    assert not any(line != line.rstrip() for line in lines), "nothing trails"


def test_the_longest_bar_leaves_room_for_its_mark(place):
    assert "█ ◂ used" in ESCAPE.sub("", summary(place, "--count", "2"))


def test_wide_characters_take_two_columns(place):
    folder = " ".join(["屋根の上", "крыша"] * 9)
    text = summary(place, "--out", folder)
    assert folder in " ".join(ESCAPE.sub("", text).split())
    for line in ESCAPE.sub("", text).split("\n"):
        assert sum(2 if unicodedata.east_asian_width(c) in "WF" else 1 for c in line) <= 80, line


def test_no_color_takes_the_colours_away_and_nothing_else(place):
    coloured = summary(place)
    plain = summary(place, env=environment(NO_COLOR="1"))
    assert "\x1b" not in plain and BLOCKS.search(plain)
    check_content(plain, study_of(place / "p-tincture"))
    assert "\x1b" in summary(place, env=environment(NO_COLOR="")), "empty is not set (no-color.org)"
    assert "\x1b" in coloured


def test_a_pipe_gets_no_escapes(place):
    result = run("reduce", "p.png", cwd=place)
    assert (result.status, result.err) == (0, "")
    assert "\x1b" not in result.out
    check_content(result.out, study_of(place / "p-tincture"))


def test_a_dumb_terminal_gets_no_escapes(place):
    text = summary(place, env=environment(TERM="dumb"))
    assert "\x1b" not in text
    check_content(text, study_of(place / "p-tincture"))


@pytest.mark.parametrize("locale", [{"LANG": "C"}, {"LANG": None}, {"LC_ALL": "POSIX"}, {"LC_CTYPE": "C"}])
def test_a_terminal_without_utf8_gets_ascii(place, locale):
    text = summary(place, env=environment(**locale))
    assert text.isascii() and "\x1b[48;2;" in text
    check_content(text, study_of(place / "p-tincture"))


def test_quiet_prints_nothing(place):
    assert run_in_terminal("reduce", "p.png", "--quiet", cwd=place).out == ""
    result = run_in_terminal("reduce", "none.png", "--quiet", cwd=place)
    assert (result.status, result.out) == (1, "") and result.err.startswith("tincture: none.png: ")


def test_json_on_a_terminal_is_the_study_and_nothing_else(place):
    result = run_in_terminal("reduce", "p.png", "--json", cwd=place, screens=("out",))
    assert (result.status, result.err) == (0, "")
    assert result.out == (place / "p-tincture/study.json").read_text(encoding="utf-8")
    json.loads(result.out)
    assert run("reduce", "p.png", "--json", "--quiet", "--force", cwd=place).out == result.out


def test_a_given_count_is_marked_beside_the_proposal(place):
    proposed = study_of(place / "p-tincture")["proposal"]["count"] if summary(place) else 0
    words = " ".join(ESCAPE.sub("", summary(place, "--count", "9")).split())
    assert "9 colours, as asked" in words
    assert study_of(place / "p-tincture")["proposal"]["count"] == proposed != 9


def test_progress_is_shown_on_a_terminal_and_taken_away(slow_picture, tmp_path):
    result = run_in_terminal("reduce", slow_picture, *SLOWLY, cwd=tmp_path, screens=("err",))
    assert result.status == 0 and "\x1b" not in result.out
    shown = [int(part) for part in re.findall(r"(\d+) % ", result.err)]
    assert len(shown) > 3 and shown == sorted(shown) and 0 <= shown[0] and shown[-1] <= 100
    assert result.err.endswith("\r\x1b[K")
    assert "\n" not in result.err, "one line, drawn again and again"


def test_no_progress_in_a_pipe_with_quiet_or_on_a_dumb_terminal(slow_picture, tmp_path):
    assert run("reduce", slow_picture, *SLOWLY, "--out", "a", cwd=tmp_path).err == ""
    for name, options, env in (("b", ("--quiet",), None), ("c", (), environment(TERM="dumb"))):
        result = run_in_terminal("reduce", slow_picture, *SLOWLY, "--out", name, *options, cwd=tmp_path,
                                 screens=("err",), env=env)
        assert (result.status, result.err) == (0, "")


@pytest.mark.parametrize("number", [signal.SIGINT, signal.SIGTERM, signal.SIGHUP])
def test_a_signal_leaves_nothing_behind(slow_picture, tmp_path, number):
    running = Terminal("reduce", slow_picture, *VERY_SLOWLY, cwd=tmp_path)
    running.read_until(lambda: " % " in running.screens["err"].text())  # in the middle of the work
    assert [name for name in os.listdir(tmp_path) if name.startswith(".")], "it has begun to stage"
    start = time.monotonic()
    os.kill(running.process.pid, number)
    result = running.finish()
    assert time.monotonic() - start < 5
    assert (result.status, result.out) == (-number, "")
    assert result.err.endswith("\r\x1b[K"), "the line of progress is gone, and there is no other"
    assert names_in(tmp_path) == []


def test_a_signal_leaves_the_files_of_an_earlier_run(slow_picture, place):
    run("reduce", "p.png", "--out", "out", "--quiet", cwd=place)
    before = {path: path.read_bytes() for path in (place / "out").iterdir()}
    running = Terminal("reduce", slow_picture, *VERY_SLOWLY, "--out", "out", "--force", cwd=place)
    running.read_until(lambda: " % " in running.screens["err"].text())
    os.kill(running.process.pid, signal.SIGINT)
    assert running.finish().status == -signal.SIGINT
    assert {path: path.read_bytes() for path in (place / "out").iterdir()} == before
    assert sorted(os.listdir(place)) == ["out", "p.png"]
