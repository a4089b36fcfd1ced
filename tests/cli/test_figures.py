"""Every figure of study.json again, pixel by pixel, from the two pictures and the palettes alone.

The arithmetic is that of colour_maths.py, in double precision; the program's is stated to be within
6e-5 of a Lab unit (and LittleCMS, which works in single precision, to 1e-3) and 1e-3 CIEDE2000.
"""
import csv

import numpy as np
import pytest
from PIL import Image

import colour_maths
import pictures
from conftest import Case
from running import PROJECT, reduce, study_of

LAB_ERROR = 1e-3
DE00_ERROR = 4e-3  # of two colours that are off by LAB_ERROR each, and 1e-3 of the vector code
SHARE_ERROR = 6e-7  # six decimals
CASES = ("poster", "noisy", "flat", "deep", "grey", "wide", "clear", "photo")


def published(name):
    with (PROJECT / "tests/published-data" / name).open(encoding="utf-8") as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


def numbers(row, *columns):
    return np.array([float(row[column]) for column in columns])


def test_our_ciede2000_gives_the_published_differences():
    """Sharma, Wu, Dalal 2005, table 1."""
    pairs = published("ciede2000_sharma2005.csv")
    assert len(pairs) == 34
    for pair in pairs:
        ours = colour_maths.ciede2000(numbers(pair, "L1", "a1", "b1"), numbers(pair, "L2", "a2", "b2"))
        assert ours == pytest.approx(float(pair["dE00_published"]), abs=5.1e-5), pair
        assert ours == pytest.approx(float(pair["dE00_exact"]), abs=1e-9), pair


def test_our_lab_of_srgb_gives_the_reference_values():
    """Printed by LittleCMS 2.14; see SOURCES.md."""
    for row in published("srgb_lab_reference.csv"):
        ours = colour_maths.SRGB.lab(numbers(row, "R", "G", "B") / 255)
        expected = numbers(row, "d50_lcms_L", "d50_lcms_a", "d50_lcms_b")
        assert ours == pytest.approx(expected, abs=2e-4), row


@pytest.fixture(scope="session")
def clear(tmp_path_factory):
    """Partly transparent: alpha from nothing to all across the picture."""
    pixels = pictures.noisy(100, 64, seed=5)
    alpha = np.broadcast_to(np.linspace(0, 255, 100).round(), (64, 100))
    return Case(tmp_path_factory.mktemp("clear"), pictures.with_alpha(pixels, alpha))


class Photo:
    """A JPEG, read by the library that others read it with."""

    def __init__(self, folder):
        picture = folder / "photo.jpg"
        Image.fromarray(pictures.noisy(96, 72, seed=6)).save(picture, quality=85)
        with Image.open(picture) as image:
            self.pixels = np.asarray(image)
        self.folder = reduce(picture, cwd=folder)
        self.study = study_of(self.folder)


@pytest.fixture(scope="session")
def photo(tmp_path_factory):
    return Photo(tmp_path_factory.mktemp("photo"))


class Measured:
    """The opaque pixels of a case in Lab, each different colour once, and its study."""

    def __init__(self, name, case):
        self.name, self.study, self.folder = name, case.study, case.folder
        self.space = colour_maths.SRGB
        if name == "wide":
            self.space = colour_maths.gamma_space(pictures.WIDE_MATRIX, pictures.GAMMA)
        pixels = case.pixels if case.pixels.ndim == 3 else np.repeat(case.pixels[:, :, None], 3, axis=2)
        self.opaque = np.ones(pixels.shape[:2], bool) if pixels.shape[2] == 3 else pixels[:, :, 3] >= 128
        scale = 65535 if pixels.dtype == np.uint16 else 255
        colours, self.index, self.weight = np.unique(
            pixels[self.opaque][:, :3], axis=0, return_inverse=True, return_counts=True)
        self.lab = self.space.lab(colours / scale)
        self.counts = [point["count"] for point in self.study["curve"]]

    def palette(self, count):
        return next(p["colours"] for p in self.study["palettes"] if p["count"] == count)

    def palette_lab(self, count):
        return np.array([colour["lab"] for colour in self.palette(count)])

    def mean(self, values):
        return float((values * self.weight).sum() / self.weight.sum())

    def covering(self, values, share):
        """The smallest value that covers the share of the pixels."""
        order = np.argsort(values)
        covered = np.cumsum(self.weight[order])
        return float(values[order][np.searchsorted(covered, share * covered[-1])])


@pytest.fixture(scope="module", params=CASES)
def measured(request):
    return Measured(request.param, request.getfixturevalue(request.param))


def test_the_curve_starts_at_one_and_has_every_count(measured):
    distinct = measured.study["picture"]["distinct_colours"]
    assert distinct == len(measured.lab)
    assert measured.counts == list(range(1, min(25, distinct) + 1))
    assert [p["count"] for p in measured.study["palettes"]] == measured.counts
    assert all(len(measured.palette(count)) == count for count in measured.counts)


def test_every_column_of_the_curve_at_every_count(measured):
    for point in measured.study["curve"]:
        palette = measured.palette_lab(point["count"])
        squared = colour_maths.squared_distances(measured.lab, palette)
        nearest = squared.argmin(axis=1)
        least = squared[np.arange(len(nearest)), nearest]
        de00 = colour_maths.ciede2000(measured.lab, palette[nearest])
        where = (measured.name, point)

        mse = measured.mean(least)
        assert point["mse"] == pytest.approx(mse, abs=2 * LAB_ERROR * mse**0.5 + LAB_ERROR**2 + 1e-6), where
        assert point["mean_de00"] == pytest.approx(measured.mean(de00), abs=DE00_ERROR), where
        p95 = measured.covering(de00, 0.95)
        assert point["p95_de00"] == pytest.approx(p95, abs=DE00_ERROR), where
        assert point["max_de00"] == pytest.approx(de00.max(), abs=DE00_ERROR), where


def partnerless(more, fewer, shared):
    """The place of the colour of the larger palette that finds no partner, and how sure that is: the
    least difference in pixels that decided between two pairs."""
    had, has, margin = set(), set(), np.inf
    for i, one in enumerate(more):
        for j, two in enumerate(fewer):
            if one["lab"] == two["lab"]:
                had.add(i), has.add(j)
    apart = np.sqrt(colour_maths.squared_distances(*(np.array([c["lab"] for c in p]) for p in (more, fewer))))
    pairs = sorted(np.ndindex(shared.shape), key=lambda pair: (-shared[pair], apart[pair]))
    while len(has) < len(fewer):
        left = [pair for pair in pairs if pair[0] not in had and pair[1] not in has]
        i, j = left[0]
        rivals = [shared[pair] for pair in left[1:] if (pair[0] == i) != (pair[1] == j)]
        margin = min([margin, *(shared[i, j] - rival for rival in rivals[:1])])
        had.add(i), has.add(j)
    lost, = set(range(len(more))) - had
    return lost, margin


def test_what_each_count_costs_against_one_more(measured):
    """Both palettes again: where the pixels of the colour that has no partner went, and how far."""
    compared = 0
    for point in measured.study["curve"][:-1]:
        more, fewer = measured.palette(point["count"] + 1), measured.palette(point["count"])
        labels, tied = [], 0
        for palette in (more, fewer):
            squared = colour_maths.squared_distances(measured.lab, np.array([colour["lab"] for colour in palette]))
            labels.append(squared.argmin(axis=1))
            if len(palette) > 1:
                near = np.sort(squared, axis=1)
                tied += int(measured.weight[near[:, 1] - near[:, 0] < 0.004].sum())
        shared = np.zeros((len(more), len(fewer)))
        np.add.at(shared, tuple(labels), measured.weight)
        lost, margin = partnerless(more, fewer, shared)
        if tied and margin <= 2 * tied:
            continue  # pixels between two colours decide, and rounding decides about them
        compared += 1
        loss, where = point["loss"], (measured.name, point)
        assert loss["colour"] == {"index": lost, "name": more[lost]["name"], "hex": more[lost]["hex"]}, where
        assert loss["pixels"] == more[lost]["pixels"] and loss["share"] == more[lost]["share"], where
        own = labels[0] == lost
        assert abs(int(measured.weight[own].sum()) - loss["pixels"]) <= tied, where
        into = loss["into"]["index"]
        assert loss["into"] == {"index": into, "name": fewer[into]["name"], "hex": fewer[into]["hex"]}, where
        assert shared[lost, into] >= shared[lost].max() - 2 * tied, where
        slack = 2 * tied / loss["pixels"]
        assert loss["into_share"] == pytest.approx(shared[lost, into] / shared[lost].sum(), abs=slack + SHARE_ERROR)
        for ending, palette, label in (("", fewer, labels[1]), ("_before", more, labels[0])):
            lab = np.array([colour["lab"] for colour in palette])
            off = colour_maths.ciede2000(measured.lab[own], lab[label[own]])
            mean = float((off * measured.weight[own]).sum() / measured.weight[own].sum())
            assert loss["mean_de00" + ending] == pytest.approx(mean, abs=DE00_ERROR + slack * off.max()), where
            if tied == 0:
                assert loss["max_de00" + ending] == pytest.approx(off.max(), abs=DE00_ERROR), where
            assert loss["max_de00" + ending] <= point["max_de00"] + DE00_ERROR or ending
    # Colours of a grey picture often lie just between two swatches: then nobody can say whose they are.
    enough = 0.4 if measured.name == "grey" else 0.6
    assert compared >= enough * (len(measured.counts) - 1), "or this test says little"


def test_the_closest_pair_of_every_palette(measured):
    for point in measured.study["curve"]:
        palette = measured.palette_lab(point["count"])
        pairs = colour_maths.ciede2000(palette[:, None, :], palette[None, :, :])[np.triu_indices(len(palette), 1)]
        if len(palette) == 1:
            assert point["closest_pair_de00"] is None
        else:
            # The palette in the file is rounded to 1e-4 Lab.
            assert point["closest_pair_de00"] == pytest.approx(pairs.min(), abs=5e-4), (measured.name, point)


def test_the_evidence_error_never_rises_and_is_what_the_best_centres_leave(measured):
    errors = [point["evidence_mse"] for point in measured.study["curve"]]
    assert all(later <= earlier for earlier, later in zip(errors, errors[1:]))
    if measured.study["evidence"]["flat_share"] is not None:
        return  # weighted evidence cannot be told from pixels alone
    weight = measured.weight[:, None]
    for point in measured.study["curve"]:
        # The palette is rounded to 8 bits a channel, so some colours change sides: a few passes of
        # plain k-means from it lead back to the centres that it was rounded from.
        centres = np.array(measured.palette_lab(point["count"]), dtype=float)
        for _ in range(3):
            nearest = colour_maths.squared_distances(measured.lab, centres).argmin(axis=1)
            for k in np.unique(nearest):
                own = nearest == k
                centres[k] = (measured.lab[own] * weight[own]).sum(axis=0) / weight[own].sum()
        squared = colour_maths.squared_distances(measured.lab, centres).min(axis=1)
        left = float((squared * measured.weight).sum() / measured.weight.sum())
        assert point["evidence_mse"] == pytest.approx(left, rel=0.02, abs=2e-3), (measured.name, point)


def test_the_curve_of_few_colours_ends_without_error(flat):
    last = flat.study["curve"][-1]
    assert (last["count"], last["evidence_mse"], last["mse"], last["max_de00"]) == (3, 0, 0, 0)


def test_shares_and_pixels_of_every_palette(measured):
    total = measured.weight.sum()
    for count in measured.counts:
        colours = measured.palette(count)
        squared = colour_maths.squared_distances(measured.lab, measured.palette_lab(count))
        near = np.sort(squared, axis=1)
        # Colours that lie between two of the palette to within rounding may be counted with either.
        tied = int(measured.weight[near[:, 1] - near[:, 0] < 0.004].sum()) if count > 1 else 0
        pixels = np.bincount(squared.argmin(axis=1), measured.weight, minlength=count)
        assert np.abs(pixels - [colour["pixels"] for colour in colours]).max() <= tied, (measured.name, count)
        assert sum(colour["pixels"] for colour in colours) == total
        assert tied < (0.1 if measured.name == "grey" else 0.05) * total, "or this test says little"
        for colour in colours:
            assert colour["share"] == pytest.approx(colour["pixels"] / total, abs=SHARE_ERROR)
        assert colours == sorted(colours, key=lambda colour: -colour["pixels"])


def test_lab_is_that_of_the_colour_as_written(measured):
    with Image.open(measured.folder / "reduced.png") as reduced:
        palette = np.array(reduced.getpalette()).reshape(-1, 3)[: measured.study["count"]]
    expected = measured.space.lab(palette / 255)
    assert measured.palette_lab(measured.study["count"]) == pytest.approx(expected, abs=LAB_ERROR)
    for count in measured.counts:  # those that were not written could have been
        lab = measured.palette_lab(count)
        device = np.round(measured.space.device(lab) * 255)
        assert lab == pytest.approx(measured.space.lab(device / 255), abs=LAB_ERROR), (measured.name, count)


def test_hex_is_the_nearest_colour_of_srgb_and_says_how_far_it_is_off(measured):
    steps = np.array([(r, g, b) for r in (-1, 0, 1) for g in (-1, 0, 1) for b in (-1, 0, 1)])
    outside = 0
    for count in measured.counts:
        for colour in measured.palette(count):
            rgb = np.array([int(colour["hex"][i : i + 2], 16) for i in (1, 3, 5)])
            own = colour_maths.SRGB.lab(rgb / 255)
            around = colour_maths.SRGB.lab(np.clip(rgb + steps, 0, 255) / 255)
            distance = np.linalg.norm(own - colour["lab"])
            assert distance <= np.linalg.norm(around - colour["lab"], axis=1).min() + LAB_ERROR, colour
            off = float(colour_maths.ciede2000(own, colour["lab"]))
            if "hex_de00" in colour:
                outside += 1
                assert colour["hex_de00"] == pytest.approx(off, abs=DE00_ERROR)
                assert off > 0.49
            else:
                assert off < 0.51
            if measured.name != "wide":
                assert own == pytest.approx(colour["lab"], abs=LAB_ERROR), colour
    assert (outside > 20) == (measured.name == "wide"), "the wide space goes beyond sRGB, the others do not"


def test_every_pixel_has_the_nearest_colour_of_the_palette_but_for_those_that_were_tidied(measured):
    count = measured.study["count"]
    with Image.open(measured.folder / "reduced.png") as reduced:
        labels = np.asarray(reduced)[measured.opaque]
        transparent = reduced.info.get("transparency")
        assert set(np.asarray(reduced)[~measured.opaque].tolist()) <= {transparent}
    assert labels.max() < count
    squared = colour_maths.squared_distances(measured.lab, measured.palette_lab(count))[measured.index]
    given = np.sqrt(squared[np.arange(len(labels)), labels])
    other = given > np.sqrt(squared.min(axis=1)) + 2 * LAB_ERROR
    assert other.mean() == pytest.approx(measured.study["labels"]["tidied_share"], abs=SHARE_ERROR)
    shares = np.bincount(labels, minlength=count) / len(labels)
    assert measured.study["labels"]["shares"] == pytest.approx(shares, abs=SHARE_ERROR)
