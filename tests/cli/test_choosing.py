"""What is asked for is what comes: counts, ranges, colours to keep, and pictures that allow little."""
import json

import jsonschema
import numpy as np
import pytest
from PIL import Image

import colour_maths
import pictures
from running import PROJECT, contents, reduce, run, study_of


@pytest.fixture
def noisy_png(tmp_path):
    return pictures.save_png(tmp_path / "noisy.png", pictures.noisy(60, 45))


def colours_in(folder):
    """Opaque colours of reduced.png and how often they occur."""
    with Image.open(folder / "reduced.png") as reduced:
        counted = reduced.convert("RGBA").getcolors()
    return {colour[:3]: n for n, colour in counted if colour[3] == 255}


def check_schema(study):
    schema = json.loads((PROJECT / "docs/study.schema.json").read_text(encoding="utf-8"))
    jsonschema.Draft202012Validator(schema).validate(study)


def palette_of(study):
    return next(p["colours"] for p in study["palettes"] if p["count"] == study["count"])


@pytest.mark.parametrize("count", [1, 2, 7, 24, 25, 31, 256])
def test_a_count_is_used_as_given_and_the_proposal_still_made(tmp_path, noisy_png, count):
    free = study_of(reduce(noisy_png, cwd=tmp_path, out="free"))
    folder = reduce(noisy_png, "--count", str(count), cwd=tmp_path)
    study = study_of(folder)
    check_schema(study)
    assert (study["count"], study["count_was_given"]) == (count, True)
    assert len(colours_in(folder)) == len(palette_of(study)) == count
    assert study["proposal"] == free["proposal"]
    assert (free["count"], free["count_was_given"]) == (free["proposal"]["count"], False)
    # What is measured does not depend on the count.
    assert study["curve"][:25] == free["curve"]
    assert [p["count"] for p in study["curve"][25:]] == ([count] if count > 25 else [])


@pytest.mark.parametrize("options, low, high, last", [
    ((), 2, 24, 25),
    (("--at-least", "6", "--at-most", "8"), 6, 8, 25),
    (("--at-most", "3"), 2, 3, 25),
    (("--at-least", "20"), 20, 24, 25),
    (("--at-least", "30"), 30, 30, 31),
    (("--at-most", "40"), 2, 40, 41),
    (("--at-most", "1"), 1, 1, 25),
])
def test_the_range_bounds_the_proposal_and_moves_no_figure(tmp_path, noisy_png, options, low, high, last):
    free = study_of(reduce(noisy_png, cwd=tmp_path, out="free"))
    study = study_of(reduce(noisy_png, *options, cwd=tmp_path))
    check_schema(study)
    assert low <= study["proposal"]["range"][0] <= study["proposal"]["count"] <= study["proposal"]["range"][1] <= high
    assert study["curve"][-1]["count"] == last
    if last == 25:
        assert study["curve"] == free["curve"]
    knees = [vote for vote in study["proposal"]["votes"] if vote["criterion"] == "knee"]
    assert len(knees) == 1
    if last == 25:
        assert knees == [vote for vote in free["proposal"]["votes"] if vote["criterion"] == "knee"]


def test_a_range_that_excludes_the_proposal_is_said(tmp_path, noisy_png):
    free = study_of(reduce(noisy_png, cwd=tmp_path, out="free"))["proposal"]
    assert free["count"] > 3
    sentence = study_of(reduce(noisy_png, "--at-most", "3", cwd=tmp_path))["proposal"]["sentence"]
    assert "3 colours" in sentence and f"speaks for {free['count']}" in sentence


@pytest.mark.parametrize("tolerance", [0.5, 4, 9.5, 60])
def test_the_tolerance_vote_is_the_first_count_that_meets_it(tmp_path, noisy_png, tolerance):
    study = study_of(reduce(noisy_png, "--tolerance", str(tolerance), cwd=tmp_path))
    assert study["tolerance"] == tolerance
    met = [point["count"] for point in study["curve"] if point["p95_de00"] <= tolerance]
    vote, = (vote for vote in study["proposal"]["votes"] if vote["criterion"] == "tolerance")
    assert vote["count"] == (met[0] if met else None)
    assert (tolerance in (9.5, 60)) == bool(met), "both kinds are tried"
    if not met:
        assert "it would take" in vote["reason"]


def lab_of(colour):
    if isinstance(colour, str):
        return colour_maths.lab_of_hex(colour)
    return np.array(colour, dtype=float)


@pytest.mark.parametrize("keep, wanted", [
    (["#00ff00"], ["#00ff00"]),
    (["#0F0"], ["#00ff00"]),
    (["rebeccapurple"], ["#663399"]),
    (["Tomato"], ["#ff6347"]),
    (["lab(54.5 40 -12.5)"], [(54.5, 40, -12.5)]),
    (["lab(54.5% 40 -12.5)"], [(54.5, 40, -12.5)]),
    (["#00ff00", "navy", "lab(97 0 0)"], ["#00ff00", "#000080", (97, 0, 0)]),
    (["red", "#ff0000", "#F00"], ["#ff0000"]),
])
def test_kept_colours_are_in_every_palette_that_has_room(tmp_path, noisy_png, keep, wanted):
    options = [part for colour in keep for part in ("--keep", colour)]
    study = study_of(reduce(noisy_png, *options, "--at-least", "4", cwd=tmp_path))
    check_schema(study)
    assert study["curve"][0]["count"] == len(wanted)
    for palette in study["palettes"]:
        kept = [colour for colour in palette["colours"] if colour.get("kept")]
        assert len(kept) == len(wanted), palette["count"]
        for colour in wanted:
            # Within rounding to 8 bits a channel, which is at most 0.6 Lab units here.
            assert min(np.linalg.norm(lab_of(colour) - k["lab"]) for k in kept) < 0.6, colour
            if isinstance(colour, str):
                assert colour in [k["hex"] for k in kept]


def test_a_kept_colour_of_a_wide_gamut_picture_is_written_in_its_own_space(tmp_path):
    picture = pictures.save_png(tmp_path / "wide.png", pictures.vivid(60, 40), profile=pictures.wide_profile())
    study = study_of(reduce(picture, "--keep", "#ff0000", "--count", "5", cwd=tmp_path))
    kept, = (colour for colour in palette_of(study) if colour.get("kept"))
    space = colour_maths.gamma_space(pictures.WIDE_MATRIX, pictures.GAMMA)
    written = np.round(space.device(colour_maths.lab_of_hex("#ff0000")) * 255)
    # The nearest of the 8-bit colours around it.
    steps = np.array([(r, g, b) for r in (-1, 0, 1) for g in (-1, 0, 1) for b in (-1, 0, 1)])
    around = space.lab(np.clip(written + steps, 0, 255) / 255)
    least = np.linalg.norm(around - colour_maths.lab_of_hex("#ff0000"), axis=1).min()
    assert np.linalg.norm(colour_maths.lab_of_hex("#ff0000") - kept["lab"]) == pytest.approx(least, abs=2e-3)


@pytest.mark.parametrize("asked", [4, 9, 200, 256])
def test_a_count_above_the_distinct_colours_works_and_says_so(tmp_path, asked):
    picture = pictures.save_png(tmp_path / "flat.png", pictures.flat_areas())
    result = run("reduce", picture, "--count", str(asked), cwd=tmp_path)
    assert (result.status, result.err) == (0, "")
    flat_text = " ".join(result.out.split())
    assert f"{asked} colours were asked for, but the picture has only 3" in flat_text
    study = study_of(tmp_path / "flat-tincture")
    check_schema(study)
    assert (study["count"], study["count_was_given"]) == (3, True)
    assert set(colours_in(tmp_path / "flat-tincture")) == set(map(tuple, pictures.flat_areas().reshape(-1, 3).tolist()))


def test_a_count_that_the_picture_has_gives_no_such_word(tmp_path):
    picture = pictures.save_png(tmp_path / "flat.png", pictures.flat_areas())
    assert "asked for, but" not in run("reduce", picture, "--count", "3", cwd=tmp_path).out


@pytest.mark.parametrize("options", [(), ("--at-least", "5"), ("--at-most", "2"), ("--at-least", "5", "--at-most", "90")])
def test_a_picture_of_fewer_colours_than_the_range_ends_the_curve(tmp_path, options):
    picture = pictures.save_png(tmp_path / "flat.png", pictures.flat_areas())
    folder = reduce(picture, *options, cwd=tmp_path)
    study = study_of(folder)
    check_schema(study)
    assert [point["count"] for point in study["curve"]] == [1, 2, 3]
    expected = 2 if "2" in options else 3
    assert study["count"] == study["proposal"]["count"] == expected == len(colours_in(folder))


@pytest.mark.parametrize("shape", [(1, 1), (1, 50), (50, 1), (20, 30)])
def test_one_colour_alone_works(tmp_path, shape):
    pixels = np.full((*shape, 3), (12, 200, 77), np.uint8)
    folder = reduce(pictures.save_png(tmp_path / "one.png", pixels), cwd=tmp_path)
    study = study_of(folder)
    check_schema(study)
    assert (study["count"], study["proposal"]["range"]) == (1, [1, 1])
    assert colours_in(folder) == {(12, 200, 77): shape[0] * shape[1]}
    point, = study["curve"]
    assert point == {"count": 1, "evidence_mse": 0, "mse": 0, "mean_de00": 0, "p95_de00": 0, "max_de00": 0,
                     "closest_pair_de00": None, "label_bits": 0, "prediction_strength": 1, "loss": None}


@pytest.mark.parametrize("dtype, half", [(np.uint8, 128), (np.uint16, 32768)])
def test_alpha_below_half_is_transparent_and_the_rest_opaque(tmp_path, dtype, half):
    pixels = pictures.flat_areas().astype(dtype) * (257 if dtype == np.uint16 else 1)
    alpha = np.zeros(pixels.shape[:2], dtype)
    alpha[:, :10], alpha[:, 10:20], alpha[:, 20:30] = half - 1, half, half + 40
    folder = reduce(pictures.save_png(tmp_path / "clear.png", pictures.with_alpha(pixels, alpha)), cwd=tmp_path)
    study = study_of(folder)
    check_schema(study)
    assert (study["picture"]["opaque_pixels"], study["picture"]["distinct_colours"]) == (24 * 20, 2)
    with Image.open(folder / "reduced.png") as reduced:
        assert reduced.mode == "P"
        seen = np.asarray(reduced.convert("RGBA"))
    assert (seen[:, :10, 3] == 0).all() and (seen[:, 30:, 3] == 0).all() and (seen[:, 10:30, 3] == 255).all()
    assert np.array_equal(seen[:, 10:30, :3], pictures.flat_areas()[:, 10:30])
    assert sum(colour["share"] for colour in palette_of(study)) == pytest.approx(1)


def test_transparency_leaves_255_colours(tmp_path):
    alpha = np.full((45, 60), 255, np.uint8)
    alpha[0, 0] = 0
    picture = pictures.save_png(tmp_path / "clear.png", pictures.with_alpha(pictures.noisy(60, 45), alpha))
    assert len(colours_in(reduce(picture, "--count", "255", cwd=tmp_path))) == 255
    result = run("reduce", picture, "--count", "256", "--out", "full", cwd=tmp_path)
    assert (result.status, result.out, (tmp_path / "full").exists()) == (2, "", False)
    assert result.err.startswith("tincture: --count 256: ") and "at most 255" in result.err


def test_what_is_below_full_transparency_changes_nothing(tmp_path):
    pixels, alpha = pictures.noisy(40, 30), np.full((30, 40), 255, np.uint8)
    alpha[10:20] = 0
    other = pixels.copy()
    other[10:20] = 255 - other[10:20]
    one, two = tmp_path / "one", tmp_path / "two"
    for folder, content in ((one, pixels), (two, other)):
        folder.mkdir()
        pictures.save_png(folder / "p.png", pictures.with_alpha(content, alpha))
    assert contents(reduce("p.png", cwd=one)) == contents(reduce("p.png", cwd=two))


def spot_in_a_landscape():
    """Greys and greens under noise, with a red disc on 0.3 % of the pixels."""
    pixels = pictures.noisy(200, 150, seed=12, spread=6.0) // 3 + np.array([70, 90, 60], np.uint8)
    y, x = np.mgrid[:150, :200]
    pixels[(x - 120) ** 2 + (y - 60) ** 2 < 29] = (214, 22, 40)
    return pixels


def test_emphasis_keeps_a_small_colour_that_stands_apart(tmp_path):
    picture = pictures.save_png(tmp_path / "spot.png", spot_in_a_landscape())
    spot = colour_maths.lab_of_hex("#d61628")
    nearest = {}
    for emphasis in ("area", "accent", "auto"):
        study = study_of(reduce(picture, "--count", "3", "--emphasis", emphasis, cwd=tmp_path, out=emphasis))
        check_schema(study)
        palette = np.array([colour["lab"] for colour in palette_of(study)])
        nearest[emphasis] = float(np.min(colour_maths.ciede2000(np.asarray(spot)[None, :], palette)))
        accents = study["evidence"]["accents"]
        assert (accents is None) == (emphasis == "area")
        if accents:
            assert len(accents["labs"]) == 1
            mse = next(point["mse"] for point in study["curve"] if point["count"] == 3)
            assert mse >= accents["mse_by_area"] > 0
    assert nearest["accent"] < 5 and nearest["auto"] < 5 and nearest["area"] > 10, nearest


def test_an_unknown_emphasis_is_refused(tmp_path, noisy_png):
    result = run("reduce", noisy_png, "--emphasis", "loud", cwd=tmp_path)
    assert result.status == 2
    assert "--emphasis loud" in result.err
