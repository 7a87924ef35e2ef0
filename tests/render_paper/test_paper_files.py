"""Exported files: fonts, exact size, origin inside, equal bytes, whole or not at all."""

import contextlib
import json
import os
import re
import resource
import subprocess
import sys
from functools import cache
from hashlib import sha256
from io import BytesIO
from pathlib import Path
from types import SimpleNamespace

import matplotlib.image
import pytest
from paper_cases import every_mark, hard_cases, margin_map
from PIL import Image
from pypdf import PdfReader

import massdash
from massdash.errors import InputError
from massdash.render import export, tables

ORIGIN = {
    "program": "massdash 0.0.1",
    "constants": "CODATA 2018",
    "data": "as shipped",
    "scenario": 'massdash: 1\nlabel: "Lantern ☉ <x> & (y)"\nmass: 120000.0 solMass\n',
    "sources": ["An invented source (2031)"],
}
ROOT = Path(massdash.__file__).parent.parent
SMALL = margin_map(n=12)


@cache
def made(key, format, width_mm=88):
    chart = SMALL if key == "map" else every_mark()
    return export.figure_bytes(chart, format, width_mm=width_mm, provenance=ORIGIN)


def origin_in(content, format):
    """The origin that a file carries, read as its user would."""
    if format == "pdf":
        return json.loads(PdfReader(BytesIO(content)).metadata["/Keywords"])
    if format == "png":
        return json.loads(Image.open(BytesIO(content)).text["massdash"])
    from xml.etree import ElementTree

    (source,) = ElementTree.fromstring(content).iter("{http://purl.org/dc/elements/1.1/}source")
    return json.loads("".join(source.itertext()))


@pytest.mark.parametrize("format", export.FORMATS)
def test_files_carry_scenario_versions_and_sources(format):
    found = origin_in(made("energy", format), format)
    assert found == {**ORIGIN, "figure_sources": list(every_mark().sources)}


def test_pdf_fonts_are_embedded_truetype():
    page = PdfReader(BytesIO(made("energy", "pdf"))).pages[0]
    fonts = [font.get_object() for font in page["/Resources"]["/Font"].values()]
    assert fonts
    for font in fonts:
        inner = font["/DescendantFonts"][0].get_object() if "/DescendantFonts" in font else font
        assert "TrueType" in inner["/Subtype"] or inner["/Subtype"] == "/CIDFontType2"
        assert "/FontFile2" in inner["/FontDescriptor"].get_object()


def test_pdf_text_can_be_searched():
    text = PdfReader(BytesIO(made("energy", "pdf"))).pages[0].extract_text()
    assert "Central density" in text
    assert "onset of instability" in text


@pytest.mark.parametrize("width", [88, pytest.param(180, marks=pytest.mark.slow)])
def test_pages_are_exactly_as_wide_as_asked(width):
    pdf = PdfReader(BytesIO(made("map", "pdf", width_mm=width))).pages[0].mediabox
    assert float(pdf.width) / 72 * 25.4 == pytest.approx(width, abs=1e-3)
    svg = re.search(rb'width="([\d.]+)pt"', made("map", "svg", width_mm=width))
    assert float(svg[1]) / 72 * 25.4 == pytest.approx(width, abs=1e-3)
    png = Image.open(BytesIO(made("map", "png", width_mm=width)))
    assert png.width == pytest.approx(width / 25.4 * export.PNG_DPI, abs=1)
    assert png.info["dpi"][0] == pytest.approx(export.PNG_DPI, abs=0.1)
    assert export.PNG_DPI >= 300


def test_nothing_is_drawn_on_the_outermost_pixels():
    pixels = matplotlib.image.imread(BytesIO(made("energy", "png")))[..., :3]
    rim = [pixels[0], pixels[-1], pixels[:, 0], pixels[:, -1]]
    assert all((edge == 1.0).all() for edge in rim)
    assert (pixels < 0.5).any()


def test_svg_has_a_title_and_a_description_for_screen_readers():
    svg = made("energy", "svg").decode()
    assert f"<title>{every_mark().title}</title>" in svg
    assert f"<desc>{every_mark().alt}</desc>" in svg
    assert "<text" not in svg  # letters are shapes: the same on machines without the font


def digests():
    """A digest of every kind of file."""
    files = {format: made("map", format) for format in export.FORMATS} | {"ecsv": tables.ecsv_bytes(SMALL, ORIGIN)}
    return {format: sha256(content).hexdigest() for format, content in files.items()}


@pytest.mark.parametrize("format", export.FORMATS)
def test_equal_input_gives_equal_bytes(format):
    assert export.figure_bytes(SMALL, format, provenance=ORIGIN) == made("map", format)


@pytest.mark.slow
def test_equal_input_gives_equal_bytes_in_every_process():
    code = "import sys; sys.path.insert(0, 'tests/render_paper'); import test_paper_files as t; print(t.digests())"
    environment = {**os.environ, "PYTHONHASHSEED": "7"}
    other = subprocess.run([sys.executable, "-c", code], env=environment, cwd=ROOT, capture_output=True, check=True)
    assert other.stdout.decode().strip() == str(digests())


@pytest.mark.parametrize("format", export.FORMATS)
def test_no_date_is_written(format):
    assert not re.search(rb"CreationDate|ModDate|<dc:date>|tIME", made("map", format))


def test_save_figure_goes_by_the_suffix(tmp_path):
    path = export.save_figure(SMALL, tmp_path / "map.PDF", provenance=ORIGIN)
    assert path.read_bytes().startswith(b"%PDF")
    with pytest.raises(InputError, match=r"file name: 'map.jpg' is not allowed; give a name that ends in .pdf, .svg"):
        export.save_figure(SMALL, tmp_path / "map.jpg", provenance=ORIGIN)


def test_export_writes_every_format_and_the_numbers(tmp_path):
    charts = (SMALL, hard_cases()[0])
    paths = export.export_figures(charts, tmp_path, formats=("svg", "pdf"), provenance=ORIGIN)
    names = ["map.svg", "map.pdf", "map.ecsv", "gaps.svg", "gaps.pdf", "gaps.ecsv"]
    assert [path.name for path in paths] == names
    assert sorted(path.name for path in tmp_path.iterdir()) == sorted(names)
    assert export.export_figures(charts[:1], tmp_path, provenance=ORIGIN, with_data=False) == [tmp_path / "map.pdf"]


@pytest.mark.parametrize(
    ("changes", "sentence"),
    [
        ({"formats": ("pdf", "jpg")}, "formats: 'jpg' is not allowed; give pdf, svg, png"),
        ({"width_mm": 20}, "width_mm: 20 is not allowed; give 40 to 400 mm"),
        ({"width_mm": float("nan")}, "width_mm: nan is not allowed"),
        ({"charts": (SMALL, SMALL)}, "charts: .*'map', 'map'.*, with a key twice"),
        ({"directory": Path("/nowhere/at all")}, "directory: '/nowhere/at all' is not allowed; give a directory that"),
    ],
)
def test_refused_requests_write_nothing(tmp_path, changes, sentence):
    request = {"charts": (SMALL,), "directory": tmp_path, **changes}
    with pytest.raises(InputError, match=sentence):
        export.export_figures(**request, provenance=ORIGIN)
    assert list(tmp_path.iterdir()) == []


def test_a_write_protected_directory_is_refused(tmp_path, monkeypatch):
    monkeypatch.setattr(export.os, "access", lambda path, mode: False)  # the superuser may write anywhere
    with pytest.raises(InputError, match="which is write-protected, is not allowed; give a directory you may write to"):
        export.export_figures((SMALL,), tmp_path, provenance=ORIGIN)


def test_a_file_in_place_of_the_directory_is_refused(tmp_path):
    (tmp_path / "taken").write_text("")
    with pytest.raises(InputError, match="give a directory that exists"):
        export.export_figures((SMALL,), tmp_path / "taken", provenance=ORIGIN)


@contextlib.contextmanager
def no_room():
    """Files end after 1000 bytes, as on a full disk; only for a moment, for the test's own log is a file too."""
    soft, hard = resource.getrlimit(resource.RLIMIT_FSIZE)
    resource.setrlimit(resource.RLIMIT_FSIZE, (1000, hard))
    try:
        yield
    finally:
        resource.setrlimit(resource.RLIMIT_FSIZE, (soft, hard))


def test_without_room_the_old_file_stays_whole(tmp_path):
    path = tmp_path / "map.pdf"
    path.write_bytes(b"old")
    sentence = r"map\.pdf: cannot be written \(File too large\); give a place .* 5000 bytes"
    with no_room(), pytest.raises(InputError, match=sentence):
        export.write_file(path, b"x" * 5000)
    assert path.read_bytes() == b"old"
    assert list(tmp_path.iterdir()) == [path]


def test_origin_of_an_outcome_has_the_scenario_as_its_file():
    scenario = massdash.Scenario(label="Lantern", mass="1.2e5 solMass")
    entry = SimpleNamespace(value=1.0, source="An invented source (2031)")
    origin = export.provenance(SimpleNamespace(scenario=scenario, entries={"mass": entry}))
    from massdash.scenario import from_text

    assert from_text(origin["scenario"]) == scenario
    assert origin["sources"] == ["An invented source (2031)"]
    assert origin["program"].startswith("massdash ")
    assert set(origin) == {"program", "constants", "data", "scenario", "sources"}
