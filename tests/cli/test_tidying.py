"""The label map of reduced.png: edges without a third colour, no specks, and fine things that stay."""
import numpy as np
import pytest
from PIL import Image, ImageDraw

import pictures
from running import reduce, study_of

USUAL_SPECK = 3  # of docs/commands.md


def labels_in(folder):
    """The indices of reduced.png, and which of its pixels are opaque."""
    with Image.open(folder / "reduced.png") as reduced:
        labels = np.asarray(reduced)
        return labels, labels != reduced.info.get("transparency", -1)


def components(labels, opaque):
    """Lists of the opaque pixels that have one label and touch, be it at a corner."""
    height, width = labels.shape
    seen = ~opaque
    found = []
    for start in zip(*np.nonzero(opaque)):
        if seen[start]:
            continue
        seen[start] = True
        pixels = [start]
        for y, x in pixels:
            for j in range(max(y - 1, 0), min(y + 2, height)):
                for i in range(max(x - 1, 0), min(x + 2, width)):
                    if not seen[j, i] and labels[j, i] == labels[start]:
                        seen[j, i] = True
                        pixels.append((j, i))
        found.append(pixels)
    return found


def could_join(pixels, labels, opaque):
    """Whether an opaque pixel of another label shares a side with one of these."""
    for y, x in pixels:
        for j, i in ((y - 1, x), (y + 1, x), (y, x - 1), (y, x + 1)):
            if 0 <= j < labels.shape[0] and 0 <= i < labels.shape[1] and opaque[j, i] and labels[j, i] != labels[y, x]:
                return True
    return False


def smallest_that_could_join(folder):
    labels, opaque = labels_in(folder)
    return min((len(c) for c in components(labels, opaque) if could_join(c, labels, opaque)), default=None)


def speckled_poster():
    """Flat art with dirt: some of it noise, some of it dots of an ink."""
    random = np.random.RandomState(7)
    pixels = pictures.poster(240, 180).astype(float)
    pixels += random.normal(0, 3, pixels.shape)
    for _ in range(160):
        y, x, ink = random.randint(180), random.randint(240), pictures.INKS[random.randint(5)]
        pixels[y : y + random.randint(1, 4), x : x + random.randint(1, 4)] = ink
    return np.clip(np.round(pixels), 0, 255).astype(np.uint8)


def with_holes(pixels):
    alpha = np.where(np.random.RandomState(8).uniform(size=pixels.shape[:2]) < 0.04, 0, 255)
    return pictures.with_alpha(pixels, alpha)


@pytest.fixture(scope="module")
def speckled(tmp_path_factory):
    return pictures.save_png(tmp_path_factory.mktemp("speckled") / "speckled.png", speckled_poster())


@pytest.fixture(scope="module")
def holed(tmp_path_factory):
    return pictures.save_png(tmp_path_factory.mktemp("holed") / "holed.png", with_holes(speckled_poster()))


@pytest.mark.parametrize("picture", ["speckled", "holed"])
@pytest.mark.parametrize("options, smallest", [((), USUAL_SPECK), (("--speck", "12"), 12), (("--speck", "500"), 500)])
def test_no_speck_remains_where_one_could_join_another_colour(request, tmp_path, picture, options, smallest):
    path = request.getfixturevalue(picture)
    left = reduce(path, "--speck", "0", cwd=tmp_path, out="left")
    assert study_of(left)["evidence"]["kind"] == "flat art"
    assert smallest_that_could_join(left) < USUAL_SPECK, "or there is nothing to tidy"
    tidied = smallest_that_could_join(reduce(path, *options, cwd=tmp_path))
    assert tidied is None or tidied >= smallest


def test_what_is_no_speck_stays(tmp_path, speckled):
    folders = [reduce(speckled, "--speck", n, cwd=tmp_path, out=n) for n in ("0", "1", "12")]
    before, same, after = (labels_in(folder)[0] for folder in folders)
    assert (before == same).all()
    stays = np.zeros(before.shape, bool)
    for pixels in components(before, np.ones(before.shape, bool)):
        if len(pixels) >= 12:
            stays[tuple(zip(*pixels))] = True
    assert (before == after)[stays].all()
    assert (before != after)[~stays].mean() > 0.8, "but for what a speck beside it joined"


@pytest.mark.parametrize("threads", [2, 3, 7])
@pytest.mark.parametrize("picture", ["speckled", "holed"])
def test_threads_have_no_say_in_labels(request, tmp_path, picture, threads):
    path = request.getfixturevalue(picture)
    options = ("--speck", "12", "--threads")
    one = labels_in(reduce(path, *options, "1", cwd=tmp_path, out="one"))
    many = labels_in(reduce(path, *options, str(threads), cwd=tmp_path, out="many"))
    assert (one[0] == many[0]).all() and (one[1] == many[1]).all()


def test_continuous_tone_keeps_the_nearest_colours_unless_specks_are_named(tmp_path):
    picture = pictures.save_png(tmp_path / "noisy.png", pictures.noisy(150, 110))
    plain = reduce(picture, cwd=tmp_path, out="plain")
    assert study_of(plain)["evidence"]["kind"] == "continuous tone"
    assert study_of(plain)["labels"]["tidied_share"] == 0
    assert smallest_that_could_join(plain) == 1
    tidied = reduce(picture, "--speck", "9", cwd=tmp_path)
    assert smallest_that_could_join(tidied) >= 9
    changed = (labels_in(plain)[0] != labels_in(tidied)[0]).mean()
    assert study_of(tidied)["labels"]["tidied_share"] == pytest.approx(changed, abs=6e-7)


def drawn(size, draw_on, scale=5):
    """What is drawn on a sheet `scale` times as large, and for each pixel the colour at its centre."""
    sheet = Image.new("RGB", (size * scale, size * scale), (250, 247, 240))
    draw_on(ImageDraw.Draw(sheet), scale)
    middle = np.asarray(sheet)[scale // 2 :: scale, scale // 2 :: scale]
    return np.asarray(sheet.resize((size, size), Image.Resampling.BOX)), middle


BLACK, GREY, RED = (20, 20, 24), (136, 134, 132), (190, 40, 44)


def black_grey_and_red(draw, scale):
    """Grey is what lies between black and paper."""
    draw.ellipse((20 * scale, 20 * scale, 90 * scale, 90 * scale), fill=BLACK)
    draw.ellipse((38 * scale, 38 * scale, 72 * scale, 72 * scale), fill=RED)
    draw.rectangle((110 * scale, 20 * scale, 170 * scale, 80 * scale), fill=GREY)
    draw.line((20 * scale, 110 * scale, 170 * scale, 150 * scale), fill=BLACK, width=2 * scale)
    draw.line((20 * scale, 130 * scale, 170 * scale, 170 * scale), fill=GREY, width=2 * scale)
    for i in range(12):  # like the dots of small lettering
        x, y = (24 + 12 * i) * scale, (100 + i % 3) * scale
        draw.rectangle((x, y, x + 2 * scale - 1, y + 2 * scale - 1), fill=BLACK)


def inks_of(folder, count):
    with Image.open(folder / "reduced.png") as reduced:
        palette = np.array(reduced.getpalette()).reshape(-1, 3)[:count]
        return palette[np.asarray(reduced)]


def halo_share(inks, truth):
    """Pixels with a colour that none of the 3 x 3 around them has in truth."""
    height, width, _ = truth.shape
    around = np.pad(truth, ((1, 1), (1, 1), (0, 0)), "edge")
    near = [(around[j : j + height, i : i + width] == inks).all(axis=2) for j in range(3) for i in range(3)]
    return 1 - np.any(near, axis=0).mean()


def test_edges_have_no_outline_of_a_third_colour_and_strokes_and_dots_stay(tmp_path):
    pixels, truth = drawn(190, black_grey_and_red)
    folder = reduce(pictures.save_png(tmp_path / "drawn.png", pixels), "--count", "4", cwd=tmp_path)
    colours = np.array([(250, 247, 240), BLACK, GREY, RED])
    nearest = colours[np.abs(pixels[:, :, None].astype(int) - colours).sum(axis=3).argmin(axis=2)]
    assert halo_share(nearest, truth) > 0.005, "or there is nothing to tidy"
    inks = inks_of(folder, 4)
    assert halo_share(inks, truth) <= 0.0002
    assert (inks == truth).all(axis=2).mean() > 0.99
    strokes = np.zeros(truth.shape[:2], bool)
    strokes[97:] = (truth[97:] != colours[0]).any(axis=2)
    assert (inks == truth).all(axis=2)[strokes].mean() > 0.97
    share = study_of(folder)["labels"]["tidied_share"]
    assert 0.005 < share < 0.05
