"""Checks the surroundings, and runs that several tests look at."""
import os

import pytest

import pictures
import running


def pytest_configure():
    if not os.access(running.TINCTURE, os.X_OK):
        raise pytest.UsageError("set TINCTURE to the path of the program to test")


class Case:
    """A picture, the run on it, and its pixels."""

    def __init__(self, folder, pixels, *options, **png):
        self.pixels = pixels
        self.options = options
        self.picture = pictures.save_png(folder / "picture.png", pixels, **png)
        self.folder = running.reduce(self.picture, *options, cwd=folder)
        self.study = running.study_of(self.folder)


@pytest.fixture(scope="session")
def poster(tmp_path_factory):
    return Case(tmp_path_factory.mktemp("poster"), pictures.poster(), dpi=(300, 300))


@pytest.fixture(scope="session")
def noisy(tmp_path_factory):
    return Case(tmp_path_factory.mktemp("noisy"), pictures.noisy())


@pytest.fixture(scope="session")
def flat(tmp_path_factory):
    return Case(tmp_path_factory.mktemp("flat"), pictures.flat_areas())


@pytest.fixture(scope="session")
def deep(tmp_path_factory):
    return Case(tmp_path_factory.mktemp("deep"), pictures.deep())


@pytest.fixture(scope="session")
def grey(tmp_path_factory):
    return Case(tmp_path_factory.mktemp("grey"), pictures.grey(), "--evidence", "all")


@pytest.fixture(scope="session")
def wide(tmp_path_factory):
    return Case(tmp_path_factory.mktemp("wide"), pictures.vivid(), profile=pictures.wide_profile(), dpi=(240, 120))


@pytest.fixture(scope="session")
def slow_picture(tmp_path_factory):
    """Noise, every pixel of its own colour: slow enough to be watched when many counts are asked for."""
    return pictures.save_png(tmp_path_factory.mktemp("slow") / "slow.png", pictures.noisy(400, 300, spread=40.0))
