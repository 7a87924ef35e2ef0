"""The page in a real browser, with the stand-in notebook: that it lives, says when it no longer does, and tidies up."""

import subprocess

import pytest
from playwright.sync_api import expect
from running import wait_until

pytestmark = pytest.mark.browser
SLOW = 60_000  # milliseconds; only ever waited for when something is broken
LOST = "#door-lost"


def opened(page, running):
    page.goto(running.address)
    expect(page.get_by_role("slider")).to_be_visible(timeout=SLOW)
    return page


def forgive(page, text):
    """Take expected complaints out of what the page did wrong; there must be some."""
    expected = [wrong for wrong in page.wrongs if text in wrong]
    assert expected
    page.wrongs[:] = [wrong for wrong in page.wrongs if text not in wrong]


def test_the_page_opens_and_a_control_is_answered(standin, page):
    opened(page, standin)
    assert page.title() == "stand-in"
    assert "token" not in page.content()
    page.get_by_role("slider").press("ArrowRight")
    expect(page.get_by_text("twice that is 2", exact=True)).to_be_visible()
    page.wait_for_timeout(2500)
    expect(page.locator(LOST)).to_be_hidden()


def test_a_closed_tab_ends_its_kernel_and_no_other(standin, page):
    opened(page, standin)
    before = set(standin.kernels())
    tab = page.context.new_page()
    opened(tab, standin)
    (its,) = set(standin.kernels()) - before
    tab.close(run_before_unload=True)
    wait_until(lambda: its not in standin.kernels(), "the kernel of the closed tab ended")
    assert set(standin.kernels()) == before


def test_a_page_without_the_token_says_where_to_find_it(standin, page):
    page.goto(standin.base)
    expect(page.get_by_text("Open the whole address that the program printed")).to_be_visible()
    forgive(page, "403")


def test_a_dead_kernel_is_told_and_reload_helps(own_standin, page):
    opened(page, own_standin)
    subprocess.run(["kill", "-9", *map(str, own_standin.kernels())], check=True)
    expect(page.get_by_role("alert")).to_contain_text("the computation behind this page has ended", timeout=SLOW)
    forgive(page, "410")
    page.get_by_role("button", name="Reload").click()
    expect(page.locator(LOST)).to_be_hidden(timeout=SLOW)
    page.get_by_role("slider").press("ArrowRight", timeout=SLOW)
    expect(page.get_by_text("twice that is 2", exact=True)).to_be_visible()


def test_an_ended_program_is_told(own_standin, page):
    opened(page, own_standin)
    own_standin.interrupt()
    expect(page.get_by_role("alert")).to_contain_text("the program that serves this page has ended", timeout=SLOW)
    forgive(page, "ERR_CONNECTION_REFUSED")
    page.wrongs[:] = [wrong for wrong in page.wrongs if "WebSocket connection" not in wrong]
