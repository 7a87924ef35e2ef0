"""Colours: readable on both papers, even in lightness, and told apart without full colour vision."""

import itertools

import numpy as np
import pytest

from massdash.render import palette

# Machado, Oliveira & Fernandes (2009, IEEE TVCG 15, 1291), severity 1.0, in linear sRGB.
NO_RED = [[0.152286, 1.052583, -0.204868], [0.114503, 0.786281, 0.099216], [-0.003882, -0.048116, 1.051998]]
NO_GREEN = [[0.367322, 0.860646, -0.227968], [0.280085, 0.672501, 0.047413], [-0.011820, 0.042940, 0.968881]]
COLOUR_VISION = {"full": np.eye(3), "no red cones": NO_RED, "no green cones": NO_GREEN}


def seen(rgb, vision):
    return palette.oklab(palette.from_linear(palette.to_linear(rgb) @ np.transpose(COLOUR_VISION[vision])))


def test_oklab_of_white_and_of_red():
    """White is (1, 0, 0); red from the table of Ottosson (2020)."""
    np.testing.assert_allclose(palette.oklab([1, 1, 1]), [1, 0, 0], atol=1e-6)
    np.testing.assert_allclose(palette.oklab([1, 0, 0]), [0.627955, 0.224863, 0.125846], atol=1e-5)


def test_contrast_of_black_on_white_is_21():
    assert palette.contrast("#000000", "#ffffff") == pytest.approx(21)


@pytest.mark.parametrize("style", palette.STYLES, ids=lambda style: style.light)
def test_lines_and_their_labels_stand_out_on_both_papers(style):
    for line, ink, paper in (
        (style.light, style.light_ink, palette.LIGHT_PAPER),
        (style.dark, style.dark_ink, palette.DARK_PAPER),
    ):
        assert palette.contrast(line, paper) >= 3
        assert palette.contrast(ink, paper) >= 4.5


def test_published_colours_that_stand_out_are_not_changed():
    assert [style.light for style in palette.STYLES[:4]] == ["#0072b2", "#d55e00", "#009e73", "#cc79a7"]


def test_every_style_has_its_own_dash():
    assert len({style.dash for style in palette.STYLES}) == 8


@pytest.mark.parametrize("vision", COLOUR_VISION)
@pytest.mark.parametrize("theme", ["light", "dark"])
def test_the_first_four_styles_are_told_apart(theme, vision):
    colours = [seen(palette.rgb_of(getattr(style, theme)), vision) for style in palette.STYLES[:4]]
    apart = min(np.linalg.norm(one - other) for one, other in itertools.combinations(colours, 2))
    assert apart > 0.06  # about three just noticeable differences


def test_sequential_gets_lighter_evenly():
    lightness = palette.oklab(palette.colour_table("sequential") / 255)[:, 0]
    assert np.diff(lightness).min() > -1e-3
    np.testing.assert_allclose(lightness, np.interp(np.arange(256), [0, 255], lightness[[0, -1]]), atol=0.02)


def test_diverging_is_mirrored_in_lightness_about_a_middle_without_colour():
    lab = palette.oklab(palette.colour_table("diverging") / 255)
    np.testing.assert_allclose(lab[:, 0], lab[::-1, 0], atol=0.02)
    assert np.hypot(*lab[127:129, 1:].T).max() < 0.01
    assert lab[0, 2] > 0.05  # warm below
    assert lab[-1, 2] < -0.05  # cool above


@pytest.mark.parametrize("vision", COLOUR_VISION)
def test_the_two_sides_of_diverging_are_told_apart(vision):
    table = palette.colour_table("diverging") / 255
    assert np.linalg.norm(seen(table[40], vision) - seen(table[215], vision)) > 0.1


def test_tables_are_256_colours_that_cannot_be_changed():
    table = palette.colour_table("sequential")
    assert (table.shape, table.dtype, table.flags.writeable) == ((256, 3), np.uint8, False)
    with pytest.raises(ValueError, match="rainbow"):
        palette.colour_table("rainbow")
