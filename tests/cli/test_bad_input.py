"""Files that cannot be read: exit status 1, one line that says why and what to do, nothing written."""
import os
import resource
import shutil
import time
import xml.etree.ElementTree

import numpy as np
import pytest
from PIL import Image

import made_files
import pictures
from running import FILES, MANIFEST, names_in, run, sanitized, study_of


def check_refusal(result, status, *words):
    """The status, nothing on stdout and one line on stderr that holds all the words."""
    assert (result.status, result.out) == (status, ""), result
    assert result.err.startswith("tincture: ") and result.err.count("\n") == 1 and result.err.endswith("\n"), result
    for word in words:
        assert word in result.err, result


@pytest.fixture
def refused(tmp_path):
    """Runs reduce, which has to fail and leave everything as it was."""

    def check(*arguments, status=1, says=(), **options):
        before = names_in(tmp_path)
        result = run("reduce", *arguments, cwd=tmp_path, **options)
        check_refusal(result, status, *says)
        assert names_in(tmp_path) == before
        return result.err

    return check


def test_every_format_is_read_when_it_is_whole(tmp_path):
    """Or the tests below would say little."""
    for extension in made_files.FORMATS:
        name = "whole." + extension
        (tmp_path / name).write_bytes(made_files.picture_bytes(extension))
        result = run("reduce", name, "--quiet", "--out", extension, "--at-most", "3", cwd=tmp_path)
        assert (result.status, result.err) == (0, ""), extension
    assert [c["hex"] for c in study_of(tmp_path / "avif")["palettes"][1]["colours"]] == ["#145aa0", "#c83c28"]


def test_scene_of_several_bands(refused):
    """Its first band is no grey picture."""
    scene = os.path.join(os.path.dirname(__file__), "../../sample-images/river-delta-scene.tif")
    refused(scene, says=("has 4 bands", "RGB"))


def test_missing_file(refused):
    refused("none.png", says=("none.png: does not exist",))


def test_folder(refused, tmp_path):
    (tmp_path / "folder.png").mkdir()
    refused("folder.png", says=("folder.png: is a folder",))


def test_file_below_a_file(refused, tmp_path):
    (tmp_path / "file").write_text("x")
    refused("file/picture.png", says=("file/picture.png: ",))


@pytest.mark.parametrize("name", ["/dev/null", "/dev/zero"])
def test_device(refused, name):
    refused(name, says=(f"{name}: is no regular file",))


def test_pipe_is_refused_and_not_waited_for(refused, tmp_path):
    os.mkfifo(tmp_path / "pipe.png")
    refused("pipe.png", says=("pipe.png: is no regular file",))


def test_link_that_leads_nowhere(refused, tmp_path):
    (tmp_path / "link.png").symlink_to("gone.png")
    refused("link.png", says=("link.png: does not exist",))


@pytest.mark.parametrize("extension", made_files.FORMATS)
def test_zero_bytes(refused, tmp_path, extension):
    (tmp_path / f"empty.{extension}").touch()
    refused(f"empty.{extension}", says=(f"empty.{extension}: is empty",))


def test_text_named_png(refused, tmp_path):
    (tmp_path / "text.png").write_text("BMW, P6 and PNG are no pictures yet.\n" * 40)
    refused("text.png", says=("text.png: is not a supported picture: give a PNG, JPEG",))


@pytest.mark.parametrize("extension", made_files.FORMATS)
@pytest.mark.parametrize("part", [1 / 3, 0.98])
def test_cut_short(refused, tmp_path, extension, part):
    data = made_files.picture_bytes(extension)
    (tmp_path / f"cut.{extension}").write_bytes(data[: int(len(data) * part)])
    line = refused(f"cut.{extension}", says=(f"cut.{extension}: is ", "copy or export it again"))
    assert "is cut short" in line or "is damaged" in line


@pytest.mark.parametrize("extension", made_files.FORMATS)
def test_only_the_first_bytes(refused, tmp_path, extension):
    data = made_files.picture_bytes(extension)
    for size in (4, 12, 20, 40):
        (tmp_path / f"cut.{extension}").write_bytes(data[:size])
        refused(f"cut.{extension}", says=(f"cut.{extension}: ",))


@pytest.mark.parametrize("extension", ["png", "tif"])
def test_damage_in_the_middle(refused, tmp_path, extension):
    data = bytearray(made_files.picture_bytes(extension))
    middle = len(data) // 2
    data[middle : middle + 200] = bytes(200)
    (tmp_path / f"hurt.{extension}").write_bytes(data)
    refused(f"hurt.{extension}", says=(f"hurt.{extension}: is damaged",))


def little_memory():
    """For the child: no more than 400 MB, so that taking memory for the pixels would fail."""
    resource.setrlimit(resource.RLIMIT_AS, (400 << 20, 400 << 20))


@pytest.mark.parametrize("extension", made_files.HUGE)
def test_header_that_claims_too_much_is_refused_before_memory_is_taken(refused, tmp_path, extension):
    (tmp_path / f"huge.{extension}").write_bytes(made_files.HUGE[extension](100_000, 100_000))
    start = time.monotonic()
    options = {} if sanitized() else {"preexec_fn": little_memory}
    refused(f"huge.{extension}", says=(f"huge.{extension}: is too large: 100000 x 100000 pixels", "--max-pixels"),
            **options)
    assert time.monotonic() - start < 5


def test_the_largest_jpeg_is_refused_by_its_header(refused, tmp_path):
    (tmp_path / "huge.jpg").write_bytes(made_files.huge_jpg(65_000, 65_000))
    refused("huge.jpg", says=("is too large: 65000 x 65000 pixels", "--max-pixels"))


@pytest.mark.skipif(sanitized(), reason="AddressSanitizer takes memory of its own")
@pytest.mark.parametrize("extension", made_files.HUGE)
def test_a_size_below_the_limit_that_memory_does_not_hold(refused, tmp_path, extension):
    (tmp_path / f"huge.{extension}").write_bytes(made_files.HUGE[extension](22_000, 22_000))
    refused(f"huge.{extension}", says=(f"huge.{extension}: ",), preexec_fn=little_memory)


@pytest.mark.parametrize("extension", made_files.FORMATS)
def test_max_pixels(refused, tmp_path, extension):
    (tmp_path / f"p.{extension}").write_bytes(made_files.picture_bytes(extension))
    width, height = (32, 24) if extension == "avif" else (120, 90)
    size = f"{width} x {height} pixels"
    refused(f"p.{extension}", "--max-pixels", str(width * height - 1), says=(f"is too large: {size}", "--max-pixels"))
    result = run("reduce", f"p.{extension}", "--quiet", "--max-pixels", str(width * height), cwd=tmp_path)
    assert result.status == 0


@pytest.mark.parametrize("size", [(0, 5), (5, 0)])
@pytest.mark.parametrize("extension", made_files.HUGE)
def test_no_pixels(refused, tmp_path, extension, size):
    (tmp_path / f"none.{extension}").write_bytes(made_files.HUGE[extension](*size))
    refused(f"none.{extension}", says=(f"none.{extension}: ",))


def test_transparent_everywhere(refused, tmp_path):
    pictures.save_png(tmp_path / "clear.png", pictures.with_alpha(pictures.flat_areas(), np.full((24, 40), 127)))
    refused("clear.png", says=("clear.png: is transparent everywhere",))


# Colour profiles.


@pytest.mark.parametrize("profile", [b"no profile at all" * 20, pictures.wide_profile()[:150], b"\0" * 400],
                         ids=["text", "cut", "zeros"])
def test_damaged_profile(refused, tmp_path, profile):
    pictures.save_png(tmp_path / "p.png", pictures.flat_areas(), profile=profile)
    refused("p.png", says=("p.png: the colour profile ", "--profile FILE"))
    (tmp_path / "sound.icc").write_bytes(pictures.wide_profile())
    result = run("reduce", "p.png", "--quiet", "--profile", "sound.icc", cwd=tmp_path)
    assert (result.status, result.err) == (0, ""), "what the message says works"


def test_profile_that_cannot_be_unpacked(refused, tmp_path):
    data = pictures.png_bytes(pictures.flat_areas())
    (tmp_path / "p.png").write_bytes(data[:33] + pictures.png_chunk(b"iCCP", b"made\0\0no zlib stream") + data[33:])
    refused("p.png", says=("p.png: is damaged", "profile"))


def test_embedded_profile_of_the_wrong_kind(refused, tmp_path):
    pictures.save_png(tmp_path / "p.png", pictures.flat_areas(), profile=pictures.cmyk_profile())
    refused("p.png", says=("p.png: the colour profile is of the wrong kind (CMYK): the picture is RGB", "--profile"))
    pictures.cmyk_picture().save(tmp_path / "p.jpg", icc_profile=pictures.wide_profile())
    refused("p.jpg", says=("p.jpg: the colour profile is of the wrong kind (RGB): the picture is CMYK",))


def test_named_profile_of_the_wrong_kind(refused, tmp_path):
    pictures.save_png(tmp_path / "p.png", pictures.flat_areas())
    (tmp_path / "ink.icc").write_bytes(pictures.cmyk_profile())
    refused("p.png", "--profile", "ink.icc", says=("ink.icc: the colour profile is of the wrong kind (CMYK)",))


@pytest.mark.parametrize("content", [b"", b"no profile\n" * 30, pictures.wide_profile()[:200]])
def test_named_profile_that_is_damaged(refused, tmp_path, content):
    pictures.save_png(tmp_path / "p.png", pictures.flat_areas())
    (tmp_path / "hurt.icc").write_bytes(content)
    refused("p.png", "--profile", "hurt.icc", says=("hurt.icc: ",))


def test_named_profile_that_is_not_there(refused, tmp_path):
    pictures.save_png(tmp_path / "p.png", pictures.flat_areas())
    refused("p.png", "--profile", "none.icc", says=("none.icc: ", "check the name"))
    (tmp_path / "folder.icc").mkdir()
    refused("p.png", "--profile", "folder.icc", says=("folder.icc: ",))


@pytest.mark.parametrize("name", ["ink.jpg", "ink.tif"])
def test_cmyk_without_a_profile(refused, tmp_path, name):
    pictures.cmyk_picture().save(tmp_path / name)
    refused(name, says=(f"{name}: is CMYK without a colour profile", "--profile FILE"))
    (tmp_path / "press.icc").write_bytes(pictures.cmyk_profile())
    result = run("reduce", name, "--quiet", "--profile", "press.icc", cwd=tmp_path)
    assert (result.status, result.err) == (0, ""), "what the message says works"


@pytest.mark.parametrize("name, content, kind", [
    ("p.pdf", b"%PDF-1.7\n%\xe2\xe3\xcf\xd3\n1 0 obj\n<<>>\nendobj\n", "is a PDF"),
    ("p.svg", b'<?xml version="1.0"?>\n<svg xmlns="http://www.w3.org/2000/svg"/>\n', "is an SVG"),
    ("p.eps", b"%!PS-Adobe-3.0 EPSF-3.0\n%%BoundingBox: 0 0 10 10\n", "EPS"),
])
def test_drawings_are_refused_with_the_resolution_to_export_at(refused, tmp_path, name, content, kind):
    (tmp_path / name).write_bytes(content)
    refused(name, says=(f"{name}: ", kind, "export it as PNG or TIFF at 300", "600 to 1200", "line art"))


def test_gif_is_refused_with_what_to_do(refused, tmp_path):
    Image.fromarray(pictures.flat_areas()).save(tmp_path / "p.gif")
    refused("p.gif", says=("p.gif: is a GIF", "save it as"))


# Names.

NAMES = ["two words.png", "it's.png", 'say "so".png', "both ' and \".png", "new\nline.png", "tab\there.png",
         "\x1b[31mred.png", "крыша 屋根 سقف.png", "\u202egnp.exe.png", "<img src=x onerror=alert(1)>.png", "&amp;lt;.png",
         "-dash.png", "--out.png", "back\\slash.png", "a{b}.c$.png", "%s%n.png", b"bad\xff\xfebytes.png"]


@pytest.mark.parametrize("name", NAMES, ids=ascii)
def test_names_work_and_are_shown_escaped(tmp_path, name):
    raw = os.fsencode(name)
    made = pictures.save_png(tmp_path / "made.png", pictures.flat_areas())
    shutil.copyfile(made, os.path.join(os.fsencode(tmp_path), raw))
    made.unlink()
    result = run("reduce", "--", raw, cwd=tmp_path)
    assert (result.status, result.err) == (0, "")
    folder = tmp_path / (os.fsdecode(raw)[: -len(".png")] + "-tincture")
    assert names_in(folder) == sorted((*FILES, MANIFEST))
    check_name_in_outputs(folder, raw.decode("utf-8", errors="replace"))

    first_line = result.out.split("\n")[0]
    assert first_line.isprintable(), "no control character, no change of direction"
    plain = name if isinstance(name, str) else "bad\\xff\\xfebytes.png"
    if plain.isprintable() and "\\" not in plain and "'" not in plain:
        assert plain in first_line
    assert run("reduce", b"./" + raw, "--out", "again", "--quiet", cwd=tmp_path).status == 0


def check_name_in_outputs(folder, name):
    """The name as it is, where a file may hold it; never as markup."""
    study = study_of(folder)
    # An invalid sequence may be replaced byte by byte or as a whole.
    assert study["picture"]["file"].replace("\ufffd\ufffd", "\ufffd") == name.replace("\ufffd\ufffd", "\ufffd")
    for drawing in ("swatches.svg", "curve.svg"):
        text = (folder / drawing).read_text(encoding="utf-8")
        xml.etree.ElementTree.fromstring(text)
        assert "<img" not in text and "&amp;lt;" not in text.replace("&amp;amp;lt;", "")


@pytest.mark.parametrize("name", NAMES, ids=ascii)
def test_errors_show_names_escaped_on_one_line(tmp_path, name):
    raw = os.fsencode(name)
    result = run("reduce", "--", raw, cwd=tmp_path)
    check_refusal(result, 1, "does not exist")
    assert result.err[:-1].isprintable()
