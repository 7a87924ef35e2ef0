"""A visit to the whole dashboard in a real browser: served by ``massdash dashboard``, and in JupyterLab."""

import pytest
from playwright.sync_api import expect
from reader import in_browser, in_lab

from massdash.scenario import from_bytes

pytestmark = pytest.mark.browser
CONTROLS = {
    "Mass": "radius",
    "Helium Y": "mean_molecular_weight",
    "Metals Z": "mean_molecular_weight",
    "Ignition temperature": "ignition_temperature",
}
BROKEN = {
    "mass: [1, 2\n": "mass",
    "massdash: 1\nmass: .nan solMass\n": "mass",
    "massdash: 1\nmass: 1e99 solMass\n": "mass",
    "massdash: 1\nmass: 5 km\n": "mass",
    "massdash: 1\nweight: 5 solMass\n": "weight",
    "massdash: 7\n": "massdash",
}
BEGINNINGS = {"PDF": b"%PDF-", "SVG": b"<?xml", "PNG": b"\x89PNG", "data (ECSV)": b"# %ECSV"}
REFUSED = ["nan", "inf", "-5", "99", "heavy", "", "1e5 kg", "0x10"]


def every_control_moves_the_star(reader):
    for label, name in CONTROLS.items():
        slider = reader.field(label).get_by_role("slider")
        before, after = reader.changes(name, lambda slider=slider: slider.press("ArrowRight"))
        assert after != before
        slider.press("ArrowLeft")
        reader.shows(name, before)
    reader.type("Mass", "2e5")
    expect(reader.headline).to_contain_text("2×10⁵ M")
    reader.field("Ignition temperature").get_by_role("checkbox").check()
    reader.shows("ignition_temperature", 1.5e8)
    expect(reader.page.get_by_role("list", name="Warnings")).to_contain_text("gnition")
    reader.field("Mass").get_by_role("button", name="back to").click()
    expect(reader.headline).to_contain_text("10⁵ M")
    reader.page.get_by_label("Show the terms of the energy").check()
    reader.page.get_by_label("Show the terms of the energy").uncheck()


def typed_nonsense_is_refused_with_a_sentence(reader):
    before = reader.headline.inner_text()
    for text in REFUSED:
        reader.type("Mass", text)
        said = reader.field("Mass").locator(".massdash-field-message")
        expect(said).to_contain_text("100 to 1e8")
        expect(said).to_contain_text(text)
        assert reader.headline.inner_text() == before
    reader.type("Mass", "1.2e5")
    expect(said).to_be_empty()


def files_are_saved_and_opened_and_broken_ones_refused(reader):
    reader.type("Mass", "3.21e4")
    expect(reader.headline).to_contain_text("32100 M")
    name, saved = reader.download("Save scenario")
    assert name == "lantern.yaml"
    assert from_bytes(saved, where=name).mass.value == 3.21e4
    before = reader.headline.inner_text()
    for number, (content, culprit) in enumerate(BROKEN.items()):
        reader.upload(f"broken{number}.yaml", content)
        expect(reader.status).to_contain_text(f"broken{number}.yaml")
        expect(reader.status).to_contain_text(culprit)
        assert reader.headline.inner_text() == before
    reader.type("Mass", "1e6")
    reader.upload("lantern.yaml", saved.decode())
    expect(reader.status).to_contain_text("Opened lantern.yaml")
    expect(reader.headline).to_have_text(before)
    assert reader.field("Mass").get_by_role("textbox").input_value() == "32100"


def figures_and_their_data_are_exported(reader):
    for form, beginning in BEGINNINGS.items():
        reader.page.get_by_label("Format").select_option(form)
        name, content = reader.download("Export figure")
        assert content.startswith(beginning)
        assert len(content) > 2000
        assert name.startswith("lantern_energy.")
    for figure in ("Stability margin", "Margin map", "Lifetimes"):
        reader.page.get_by_label("Figure").select_option(figure)
        assert reader.download("Export figure")[1].startswith(BEGINNINGS["data (ECSV)"])


def every_chart_reads_out_and_zooms(reader):
    expect(reader.charts).to_have_count(4)
    for chart in reader.charts.all():
        plot = chart.locator(".massdash-plot")
        plot.scroll_into_view_if_needed()
        box = plot.bounding_box()
        plot.hover(position={"x": box["width"] * 0.5, "y": box["height"] * 0.5})
        expect(chart.locator(".massdash-read")).to_contain_text("=")
        plot.focus()
        before = reader.pixels(chart)
        plot.press("+")
        reader.page.wait_for_timeout(100)
        assert reader.pixels(chart) != before
        plot.press("0")
        reader.page.wait_for_timeout(100)
        assert reader.pixels(chart) == before


def a_click_on_the_map_moves_the_star(reader):
    plot = reader.page.locator('[data-chart="map"] .massdash-plot')
    plot.scroll_into_view_if_needed()
    box = plot.bounding_box()
    where = {"x": box["width"] * 0.3, "y": box["height"] * 0.6}
    _, found = reader.changes("ignition_temperature", lambda: plot.click(position=where))
    assert 1e6 < found < 1e9
    assert float(reader.field("Ignition temperature").get_by_role("textbox").input_value()) == found


def no_two_elements_share_an_identifier(reader):
    script = "[...document.querySelectorAll('.massdash-board [id]')].map(node => node.id)"
    names = reader.page.evaluate(script)
    assert names
    assert sorted(set(names)) == sorted(names)


STEPS = [
    every_control_moves_the_star,
    typed_nonsense_is_refused_with_a_sentence,
    files_are_saved_and_opened_and_broken_ones_refused,
    every_chart_reads_out_and_zooms,
    a_click_on_the_map_moves_the_star,
    no_two_elements_share_an_identifier,
    figures_and_their_data_are_exported,
]


@pytest.mark.parametrize(("server", "opened"), [("dashboard", in_browser), ("lab", in_lab)], ids=["served", "lab"])
def test_a_whole_visit(request, page, server, opened):
    running = request.getfixturevalue(server)
    page.set_viewport_size({"width": 1400, "height": 1000})
    reader = opened(page, running)
    for step in STEPS:
        reader.start_over()
        step(reader)
    page.close(run_before_unload=True)
    said = running.err.read_text()
    assert "Traceback" not in said
    assert "ERROR" not in said
