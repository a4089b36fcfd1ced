"""Every file that reduce writes, opened again by another library; and what must be in none of them."""
import csv
import itertools
import json
import os
import platform
import re
import shutil
import xml.etree.ElementTree

import jsonschema
import numpy as np
import pytest
from PIL import Image

import pictures
from running import FILES, MANIFEST, PROJECT, contents, environment, names_in, reduce, run, sanitized, study_of

SWATCH_COLUMNS = ["index", "name", "hex", "L", "a", "b", "share", "pixels"]
CURVE_COLUMNS = ["count", "evidence_mse", "mse", "mean_de00", "p95_de00", "max_de00", "closest_pair_de00", "label_bits",
                 "prediction_strength"]
LOSS_COLUMNS = ["lost", "lost_hex", "into", "into_hex", "lost_share", "into_share", "lost_mean_de00", "lost_max_de00",
                "lost_mean_de00_before", "lost_max_de00_before"]
CASES = ("poster", "noisy", "flat", "deep", "grey", "wide")


@pytest.fixture(params=CASES)
def case(request):
    return request.getfixturevalue(request.param)


def rows_of(path):
    with path.open(newline="", encoding="utf-8") as file:
        return list(csv.reader(file))


def swatches_of(case):
    return next(p["colours"] for p in case.study["palettes"] if p["count"] == case.study["count"])


def test_the_folder_holds_the_files_of_the_contract_and_no_other(case):
    assert names_in(case.folder) == sorted((*FILES, MANIFEST))


def test_the_manifest_lists_every_file_with_its_size(case):
    manifest = json.loads((case.folder / MANIFEST).read_text(encoding="utf-8"))
    assert manifest["command"] == "reduce"
    listed = {file["name"]: file["bytes"] for file in manifest["files"]}
    assert listed == {name: (case.folder / name).stat().st_size for name in FILES}


def test_study_follows_its_schema(case):
    schema = json.loads((PROJECT / "docs/study.schema.json").read_text(encoding="utf-8"))
    jsonschema.Draft202012Validator(schema).validate(case.study)


def test_swatches_csv_has_the_columns_of_the_contract_and_agrees_with_the_study(case):
    header, *rows = rows_of(case.folder / "swatches.csv")
    assert header == SWATCH_COLUMNS
    assert [int(row[0]) for row in rows] == list(range(case.study["count"]))
    for row, colour in zip(rows, swatches_of(case), strict=True):
        assert row[1:3] == [colour["name"], colour["hex"]]
        assert [float(value) for value in row[3:6]] == colour["lab"]
        assert (float(row[6]), int(row[7])) == (colour["share"], colour["pixels"])
    assert len({row[1] for row in rows}) == len(rows), "names are unique"


def test_curve_csv_has_the_columns_of_the_contract_and_agrees_with_the_study(case):
    header, *rows = rows_of(case.folder / "curve.csv")
    assert header == CURVE_COLUMNS + LOSS_COLUMNS
    first = len(CURVE_COLUMNS)
    for row, point in zip(rows, case.study["curve"], strict=True):
        values = [point[column] for column in CURVE_COLUMNS]
        assert [float(value) if value else None for value in row[:first]] == values
        loss = point["loss"]
        if loss is None:
            assert row[first:] == [""] * len(LOSS_COLUMNS)
            continue
        assert row[first : first + 4] == [loss[end][key] for end in ("colour", "into") for key in ("name", "hex")]
        assert [float(value) for value in row[first + 4 :]] == [loss[key] for key in (
            "share", "into_share", "mean_de00", "max_de00", "mean_de00_before", "max_de00_before")]
    assert [point["loss"] is None for point in case.study["curve"]] == [False] * (len(rows) - 1) + [True]
    assert [int(row[0]) for row in rows] == list(range(1, len(rows) + 1))


def test_study_tells_what_was_read(case):
    picture, pixels = case.study["picture"], case.pixels
    assert (picture["height"], picture["width"]) == pixels.shape[:2]
    assert picture["channels"] == (1 if pixels.ndim == 2 else 3)
    assert picture["bits"] == 8 * pixels.itemsize
    assert picture["file"] == "picture.png"
    assert picture["opaque_pixels"] == pixels.shape[0] * pixels.shape[1]
    assert picture["distinct_colours"] == len(np.unique(pixels.reshape(-1, picture["channels"]), axis=0))


def test_reduced_png_is_an_indexed_picture_in_the_palette(case):
    with Image.open(case.folder / "reduced.png") as reduced:
        assert (reduced.mode, reduced.size) == ("P", case.pixels.shape[1::-1])
        written = np.array(reduced.getpalette()).reshape(-1, 3)
        indices = np.asarray(reduced)
        assert "transparency" not in reduced.info
        assert ("icc_profile" in reduced.info) == (case.study["picture"]["profile"] is not None)
    assert set(np.unique(indices)) == set(range(case.study["count"]))
    if case.study["picture"]["profile"] is None:
        assert [f"#{r:02x}{g:02x}{b:02x}" for r, g, b in written[: case.study["count"]]] == [
            colour["hex"] for colour in swatches_of(case)
        ]
    shares = np.bincount(indices.ravel(), minlength=case.study["count"]) / indices.size
    assert np.allclose(case.study["labels"]["shares"], shares, atol=1e-6)


def test_resolution_and_profile_are_kept(wide, poster, noisy):
    with Image.open(wide.folder / "reduced.png") as reduced:
        assert reduced.info["icc_profile"] == pictures.wide_profile()
        assert reduced.info["dpi"] == pytest.approx((240, 120), abs=0.02)
    assert wide.study["picture"]["profile"] == "Wide test space"
    assert wide.study["picture"]["dpi"] == pytest.approx([240, 120], abs=0.02)
    with Image.open(poster.folder / "reduced.png") as reduced:
        assert reduced.info["dpi"] == pytest.approx((300, 300), abs=0.02)
    with Image.open(noisy.folder / "reduced.png") as reduced:
        assert "dpi" not in reduced.info
    assert noisy.study["picture"]["dpi"] is None


def test_profile_of_a_jpeg_is_kept_and_that_of_cmyk_is_not(tmp_path):
    rgb, ink = tmp_path / "rgb.jpg", tmp_path / "ink.jpg"
    Image.fromarray(pictures.noisy()).save(rgb, icc_profile=pictures.wide_profile(), dpi=(200, 200), quality=92)
    pictures.cmyk_picture().save(ink, icc_profile=pictures.cmyk_profile())
    with Image.open(reduce(rgb, cwd=tmp_path, out="rgb") / "reduced.png") as reduced:
        assert reduced.info["icc_profile"] == pictures.wide_profile()
        assert reduced.info["dpi"] == pytest.approx((200, 200), abs=0.02)
    folder = reduce(ink, cwd=tmp_path, out="ink")
    assert (study_of(folder)["picture"]["profile"], study_of(folder)["picture"]["channels"]) == ("Invented press", 4)
    with Image.open(folder / "reduced.png") as reduced:
        assert "icc_profile" not in reduced.info


@pytest.mark.parametrize("count, bits", [(2, 1), (4, 2), (5, 4), (16, 4), (17, 8)])
def test_indices_take_no_more_bits_than_they_need(tmp_path, count, bits):
    picture = pictures.save_png(tmp_path / "p.png", pictures.noisy(60, 40))
    folder = reduce(picture, "--count", str(count), cwd=tmp_path)
    chunks = dict(pictures.png_chunks((folder / "reduced.png").read_bytes()))
    assert chunks["IHDR"][8] == bits
    with Image.open(folder / "reduced.png") as reduced:
        assert len(reduced.getcolors()) == count


def test_tokens_have_the_shape_of_the_format(case):
    """Design Tokens Community Group, format and colour modules, 2025.10."""
    palette = json.loads((case.folder / "swatches.tokens.json").read_text(encoding="utf-8"))["palette"]
    tokens = {name: token for name, token in palette.items() if not name.startswith("$")}
    assert len(tokens) == case.study["count"]
    for (name, token), colour in zip(tokens.items(), swatches_of(case), strict=True):
        assert not re.search(r"[{}.]", name)
        assert token["$type"] == "color"
        assert token["$value"]["colorSpace"] == "srgb"
        assert token["$value"]["hex"] == colour["hex"]
        bytes_of_hex = [int(colour["hex"][i : i + 2], 16) / 255 for i in (1, 3, 5)]
        assert token["$value"]["components"] == pytest.approx(bytes_of_hex, abs=1e-4)


@pytest.mark.parametrize("name", ["swatches.svg", "curve.svg"])
def test_drawings_are_xml_that_runs_and_fetches_nothing(case, name):
    text = (case.folder / name).read_text(encoding="utf-8")
    assert "<!DOCTYPE" not in text and "<!ENTITY" not in text and "@import" not in text
    root = xml.etree.ElementTree.fromstring(text)
    svg = "{http://www.w3.org/2000/svg}"
    assert root.tag == svg + "svg"
    allowed = {svg + tag for tag in ("svg", "g", "path", "rect", "circle", "ellipse", "line", "polyline", "polygon",
                                     "text", "tspan", "title", "desc", "defs", "style", "pattern", "clipPath")}
    for element in root.iter():
        assert element.tag in allowed
        for attribute, value in element.attrib.items():
            assert not attribute.lower().startswith("on")
            assert "href" not in attribute.lower() or value.startswith("#")
            assert all(target.startswith("#") for target in re.findall(r"url\(([^)]*)", value))
        assert "url(" not in (element.text or "") or element.tag != svg + "style"
    assert len(re.findall(r"\w+://", text)) == text.count("http://www.w3.org/2000/svg")


def test_swatches_svg_names_every_colour(case):
    text = (case.folder / "swatches.svg").read_text(encoding="utf-8")
    words = " ".join(xml.etree.ElementTree.fromstring(text).itertext()).lower()
    assert all(colour["hex"] in words for colour in swatches_of(case))


def test_swatches_png_shows_every_colour(case):
    with Image.open(case.folder / "swatches.png") as chips:
        chips.load()
        shown = set(chips.convert("RGB").getdata())
    for colour in swatches_of(case):
        assert tuple(int(colour["hex"][i : i + 2], 16) for i in (1, 3, 5)) in shown


def texts_in(name, data):
    """The bytes of a file where a text could hide, compressed ones unpacked."""
    if not name.endswith(".png"):
        return data
    chunks = pictures.png_chunks(data)
    assert {kind for kind, _ in chunks} <= {"IHDR", "PLTE", "tRNS", "pHYs", "sRGB", "iCCP", "IDAT", "IEND"}, name
    return b"".join(chunk for kind, chunk in chunks if kind not in ("IDAT", "iCCP"))


def test_no_file_holds_a_date_a_host_or_a_place(case):
    hidden = [str(case.picture.parent), str(case.folder), os.getcwd(), os.path.expanduser("~") + "/", "/tmp", "/home"]
    hidden += [platform.node()] if len(platform.node()) > 3 else []
    for name, data in contents(case.folder).items():
        text = texts_in(name, data)
        for secret in hidden:
            assert secret.encode() not in text, (name, secret)
        assert not re.search(rb"\b20\d\d-\d\d-\d\d|\b\d\d:\d\d:\d\d\b|\b(19|20)\d\d\d{4}T", text), name


def test_another_place_hour_and_user_give_the_same_bytes(poster, tmp_path):
    elsewhere = tmp_path / "another place"
    elsewhere.mkdir()
    shutil.copyfile(poster.picture, elsewhere / "picture.png")
    os.utime(elsewhere / "picture.png", (1, 1))
    env = environment(TZ="Asia/Tokyo", LANG="C", HOME="/nowhere", USER="nobody", SOURCE_DATE_EPOCH="86400")
    folder = reduce("./picture.png", cwd=elsewhere, out="other name", env=env)
    assert contents(folder) == contents(poster.folder)


@pytest.mark.parametrize("threads", [1, 2, 3, 7])
@pytest.mark.parametrize("name", ["poster", "noisy", "deep"])
def test_threads_do_not_change_a_byte(request, tmp_path, name, threads):
    case = request.getfixturevalue(name)
    folder = reduce(case.picture, *case.options, "--threads", str(threads), cwd=tmp_path)
    assert contents(folder) == contents(case.folder)


def test_threads_do_not_change_a_byte_of_a_picture_large_enough_to_be_cut_up(tmp_path):
    picture = pictures.save_png(tmp_path / "large.png", pictures.noisy(1700, 1250) & 0xF0)
    folders = [reduce(picture, "--threads", n, cwd=tmp_path, out=n) for n in ("1", "2", "3", "7")]
    for one, two in itertools.pairwise(folders):
        assert contents(one) == contents(two)


def test_other_variants_of_the_c_library_s_functions_give_the_same_bytes(case, tmp_path):
    """glibc's pow, exp, sin and atan2 differ in their last bits without fused multiply-add."""
    env = environment(GLIBC_TUNABLES="glibc.cpu.hwcaps=-AVX2,-FMA,-FMA4,-AVX512F,-AVX")
    assert contents(reduce(case.picture, *case.options, cwd=tmp_path, env=env)) == contents(case.folder)


@pytest.mark.skipif(sanitized(), reason="the emulator has no room for AddressSanitizer's memory")
@pytest.mark.skipif(not shutil.which("qemu-x86_64"), reason="needs the Debian package qemu-user")
@pytest.mark.parametrize("make, cpu", [(pictures.poster, "Nehalem"), (pictures.noisy, "Nehalem"),
                                       (pictures.noisy, "core2duo"), (pictures.noisy, "max")])
def test_an_emulated_older_processor_gives_the_same_bytes(tmp_path, make, cpu):
    picture = pictures.save_png(tmp_path / "p.png", make(40, 30) & 0xF8)  # emulation is slow
    folder = reduce(picture, cwd=tmp_path, out="emulated", before=("qemu-x86_64", "-cpu", cpu))
    assert contents(folder) == contents(reduce(picture, cwd=tmp_path))


def test_json_is_the_study_and_nothing_else(poster, tmp_path):
    result = run("reduce", poster.picture, "--json", cwd=tmp_path)
    assert (result.status, result.err) == (0, "")
    assert result.out == (tmp_path / "picture-tincture/study.json").read_text(encoding="utf-8")
    assert json.loads(result.out) == poster.study
