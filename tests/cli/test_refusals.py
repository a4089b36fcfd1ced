"""Output that cannot be written and command lines that are wrong: one line, and nothing is touched."""
import json
import os
import resource
import shutil
import subprocess

import pytest

import pictures
from running import FILES, MANIFEST, TINCTURE, contents, environment, names_in, reduce, run
from test_bad_input import check_refusal


@pytest.fixture
def place(tmp_path):
    """A folder with one picture of five inks."""
    pictures.save_png(tmp_path / "p.png", pictures.poster())
    return tmp_path


def check_nothing_changes(place, *arguments, status, says, **options):
    before = contents(place), names_in(place)
    result = run(*arguments, cwd=place, **options)
    check_refusal(result, status, *says)
    assert (contents(place), names_in(place)) == before


# Folders that cannot be written.


def test_output_below_a_file(place):
    (place / "file").write_text("mine")
    for out in ("file", "file/below", "file/far/below"):
        check_nothing_changes(place, "reduce", "p.png", "--out", out, status=1, says=(f"{out}: ", "--out"))


@pytest.mark.parametrize("out", ["/proc/tincture", "/proc/self/tincture", "/dev/null/tincture"])
def test_output_where_nothing_can_be_made(place, out):
    check_nothing_changes(place, "reduce", "p.png", "--out", out, status=1, says=(f"{out}: ", "--out"))


@pytest.mark.skipif(os.geteuid() == 0, reason="permissions do not bind root")
def test_output_without_permission(place):
    (place / "closed").mkdir(mode=0o555)
    check_nothing_changes(place, "reduce", "p.png", "--out", "closed/out", status=1, says=("closed/out: ",))


def test_output_that_is_a_link_to_nowhere(place):
    (place / "link").symlink_to("gone/far")
    check_nothing_changes(place, "reduce", "p.png", "--out", "link", status=1, says=("link: ", "--out"))


def test_folder_where_a_file_has_to_go(place):
    (place / "out/curve.csv").mkdir(parents=True)
    for force in ((), ("--force",)):
        check_nothing_changes(place, "reduce", "p.png", "--out", "out", *force, status=1,
                              says=("out/curve.csv: is a folder where a file has to go",))


# A disk of a given size in a mount namespace of its own, which ends with the command.
FULL_DISK = """
mkdir disk && mount -t tmpfs -o size=$1,nr_inodes=64 none disk && cd disk || exit 99
"$2" reduce ../p.png --out out >../stdout 2>../stderr
status=$?
ls -A >../listing
exit $status
"""


def run_on_a_small_disk(place, size):
    namespace = ["unshare", "--mount"] + ([] if os.geteuid() == 0 else ["--map-root-user", "--user"])
    done = subprocess.run([*namespace, "sh", "-c", FULL_DISK, "sh", size, TINCTURE], cwd=place, capture_output=True,
                          text=True, timeout=60, env=environment())
    if done.returncode in (99, 127) or "unshare" in done.stderr:
        pytest.skip("no small disk can be mounted here: " + done.stderr.strip())
    return done.returncode, *((place / name).read_text() for name in ("stdout", "stderr", "listing"))


@pytest.mark.skipif(not shutil.which("unshare"), reason="needs unshare of util-linux")
@pytest.mark.parametrize("size", ["4k", "8k", "16k", "24k", "40k"])
def test_full_disk(place, size):
    status, out, err, listing = run_on_a_small_disk(place, size)
    assert (status, out, listing) == (1, "", ""), err
    assert err.startswith("tincture: out") and err.count("\n") == 1
    assert "free some space" in err or "No space" in err
    assert "--out" in err


@pytest.mark.skipif(not shutil.which("unshare"), reason="needs unshare of util-linux")
def test_a_disk_that_is_large_enough(place):
    status, _, err, listing = run_on_a_small_disk(place, "2m")
    assert (status, err, listing) == (0, "", "out\n"), "or the test above says little"


@pytest.mark.parametrize("limit", [0, 100, 3000, 20_000])
def test_limit_on_the_size_of_files(place, limit):
    check_nothing_changes(place, "reduce", "p.png", "--out", "out", status=1, says=("out", "--out"),
                          preexec_fn=lambda: resource.setrlimit(resource.RLIMIT_FSIZE, (limit, limit)))


def test_standard_output_that_is_full(place):
    with open("/dev/full", "w") as full:
        done = subprocess.run([TINCTURE, "reduce", "p.png", "--json"], cwd=place, stdout=full, stderr=subprocess.PIPE,
                              text=True, timeout=60)
    assert (done.returncode, done.stderr) == (1, "tincture: 'standard output': cannot be written\n")


# What is there already.


@pytest.mark.parametrize("name", [*FILES, MANIFEST])
def test_nothing_is_overwritten_without_force(place, name):
    (place / "out").mkdir()
    (place / "out" / name).write_text("mine")
    check_nothing_changes(place, "reduce", "p.png", "--out", "out", status=1,
                          says=(f"out/{name}: exists already", "--force"))


def test_other_files_in_the_folder_do_not_matter(place):
    (place / "out").mkdir()
    (place / "out/notes.txt").write_text("mine")
    reduce("p.png", cwd=place)
    assert names_in(place / "out") == sorted((*FILES, MANIFEST, "notes.txt"))
    assert (place / "out/notes.txt").read_text() == "mine"


def test_force_removes_what_the_manifest_lists_and_nothing_else(place):
    fresh = contents(reduce("p.png", cwd=place, out="fresh"))
    old = reduce("p.png", "--count", "3", cwd=place)
    (old / "notes.txt").write_text("mine")
    (old / "plates").mkdir()
    (old / "plates/01-blue.tif").write_text("of another command")
    (old / "plates/mine.tif").write_text("mine")
    (old / "sheet.html").write_text("of another command")
    manifest = json.loads((old / MANIFEST).read_text())
    manifest["files"] += [{"name": name, "bytes": 18} for name in ("plates/01-blue.tif", "sheet.html", "gone.txt")]
    (old / MANIFEST).write_text(json.dumps(manifest))
    reduce("p.png", "--force", cwd=place)
    assert contents(old) == {**fresh, "notes.txt": b"mine", "plates/mine.tif": b"mine"}


def test_force_does_not_follow_a_manifest_out_of_the_folder(place):
    old = reduce("p.png", cwd=place)
    (place / "precious.txt").write_text("mine")
    manifest = json.loads((old / MANIFEST).read_text())
    manifest["files"] += [{"name": "../precious.txt", "bytes": 4}, {"name": str(place / "precious.txt"), "bytes": 4}]
    (old / MANIFEST).write_text(json.dumps(manifest))
    reduce("p.png", "--force", cwd=place)
    assert (place / "precious.txt").read_text() == "mine"
    assert names_in(old) == sorted((*FILES, MANIFEST))


def test_a_failed_run_with_force_leaves_the_earlier_files(place):
    reduce("p.png", cwd=place)
    (place / "text.png").write_text("no picture")
    check_nothing_changes(place, "reduce", "text.png", "--out", "out", "--force", status=1, says=("text.png: ",))
    check_nothing_changes(place, "reduce", "p.png", "--out", "out", "--force", status=1, says=("out",),
                          preexec_fn=lambda: resource.setrlimit(resource.RLIMIT_FSIZE, (3000, 3000)))


@pytest.mark.parametrize("name", ["reduced.png", "swatches.png"])
def test_an_input_inside_the_output_folder_is_not_overwritten(place, name):
    first = reduce("p.png", cwd=place)
    inside = first / name
    for force in ((), ("--force",)):
        check_nothing_changes(place, "reduce", inside, "--out", "out", *force, status=1,
                              says=(f"out/{name}: is read by this run and would be overwritten",))
    (place / "link.png").symlink_to(inside)
    check_nothing_changes(place, "reduce", "link.png", "--out", "out", "--force", status=1, says=(f"out/{name}: ",))


def test_a_profile_inside_the_output_folder_is_not_removed(place):
    (place / "out").mkdir()
    (place / "out/mine.icc").write_bytes(pictures.wide_profile())
    manifest = {"tincture": "0.1.0", "command": "reduce", "files": [{"name": "mine.icc", "bytes": 1}]}
    (place / "out" / MANIFEST).write_text(json.dumps(manifest))
    check_nothing_changes(place, "reduce", "p.png", "--profile", "out/mine.icc", "--out", "out", "--force", status=1,
                          says=("out/mine.icc: is read by this run",))


def test_an_input_beside_the_output_in_its_folder_works(place):
    (place / "out").mkdir()
    (place / "p.png").rename(place / "out/p.png")
    reduce("out/p.png", cwd=place)
    assert names_in(place / "out") == sorted((*FILES, MANIFEST, "p.png"))


# Command lines.


@pytest.mark.parametrize("arguments, says", [
    ((), ("say what to do",)),
    (("--nonsense",), ("--nonsense",)),
    (("shrink", "p.png"), ("shrink",)),
    (("reduce",), ("name the picture",)),
    (("reduce", "--quiet"), ("name the picture",)),
    (("reduce", "p.png", "q.png"), ("q.png",)),
    (("reduce", "p.png", "--nonsense"), ("--nonsense",)),
    (("reduce", "p.png", "--nonsense=3"), ("--nonsense",)),
    (("reduce", "p.png", "-c", "4"), ("-c",)),
    (("reduce", "p.png", "--count"), ("--count",)),
    (("reduce", "p.png", "--count", "0"), ("--count 0: ", "from 1 to 256")),
    (("reduce", "p.png", "--count", "257"), ("--count 257: ", "from 1 to 256")),
    (("reduce", "p.png", "--count", "-3"), ("--count", "from 1 to 256")),
    (("reduce", "p.png", "--count", "4.5"), ("--count 4.5: ", "whole number")),
    (("reduce", "p.png", "--count", "many"), ("--count many: ", "whole number")),
    (("reduce", "p.png", "--count", ""), ("--count", "whole number")),
    (("reduce", "p.png", "--count", "99999999999999999999"), ("--count", "from 1 to 256")),
    (("reduce", "p.png", "--count", "4", "--count", "5"), ("--count",)),
    (("reduce", "p.png", "--at-least", "0"), ("--at-least 0: ", "from 1 to 256")),
    (("reduce", "p.png", "--at-most", "257"), ("--at-most 257: ", "from 1 to 256")),
    (("reduce", "p.png", "--at-least", "9", "--at-most", "8"), ("--at-least 9 is above --at-most 8",)),
    (("reduce", "p.png", "--tolerance", "0"), ("--tolerance 0: ", "above 0")),
    (("reduce", "p.png", "--tolerance", "-1"), ("--tolerance", "above 0")),
    (("reduce", "p.png", "--tolerance", "nan"), ("--tolerance nan: ", "above 0")),
    (("reduce", "p.png", "--tolerance", "inf"), ("--tolerance inf: ", "above 0")),
    (("reduce", "p.png", "--tolerance", "3,5"), ("--tolerance 3,5: ", "number")),
    (("reduce", "p.png", "--threads", "0"), ("--threads 0: ",)),
    (("reduce", "p.png", "--speck", "-1"), ("--speck",)),
    (("reduce", "p.png", "--speck", "2.5"), ("--speck 2.5: ", "whole number")),
    (("reduce", "p.png", "--max-pixels", "0"), ("--max-pixels 0: ",)),
    (("reduce", "p.png", "--max-pixels", "1e6"), ("--max-pixels 1e6: ",)),
    (("reduce", "p.png", "--keep", "#12345"), ("#12345", "#rrggbb")),
    (("reduce", "p.png", "--keep", "#gggggg"), ("#gggggg", "#rrggbb")),
    (("reduce", "p.png", "--keep", "reddish"), ("reddish", "CSS")),
    (("reduce", "p.png", "--keep", "lab(50, 20, 20)"), ("lab(50, 20, 20)", "lab(L a b)")),
    (("reduce", "p.png", "--keep", "lab(50 20)"), ("lab(50 20)",)),
    (("reduce", "p.png", "--keep", "red\nblue"), ("\\n",)),
    (("reduce", "p.png", "--keep", ""), ("#rrggbb",)),
    (("reduce", "p.png", "--keep", "red", "--keep", "blue", "--keep", "lime", "--count", "2"),
     ("--keep names 3 colours", "--count")),
    (("reduce", "p.png", "--keep", "red", "--keep", "blue", "--at-most", "1"), ("--keep names 2", "--at-most")),
    (("reduce", "p.png", "--out", ""), ("--out",)),
    (("reduce", "p.png", "--profile", ""), ("--profile",)),
    (("reduce", ""), ("name the picture",)),
], ids=lambda value: " ".join(value) if isinstance(value, tuple) else value)
def test_wrong_command_lines(place, arguments, says):
    check_nothing_changes(place, *arguments, status=2, says=says)


@pytest.mark.parametrize("arguments, says", [
    (("--help",), ("reduce", "--version")),
    (("reduce", "--help"), ("--count", "--at-least", "--at-most", "--tolerance", "--keep", "--profile", "--speck",
                            "--max-pixels", "--out", "--force", "--json", "--quiet", "--threads")),
    (("--version",), ("tincture 0.1.0\n",)),
])
def test_help_and_version_go_to_standard_output(place, arguments, says):
    before = names_in(place)
    result = run(*arguments, cwd=place)
    assert (result.status, result.err) == (0, "")
    assert all(word in result.out for word in says)
    assert max(map(len, result.out.split("\n"))) <= 80
    assert names_in(place) == before


def test_the_default_folder_is_the_stem_in_the_current_folder(place):
    (place / "far").mkdir()
    (place / "p.png").rename(place / "far/long.name.png")
    assert run("reduce", "far/long.name.png", "--quiet", cwd=place).status == 0
    assert sorted(os.listdir(place)) == ["far", "long.name-tincture"]
