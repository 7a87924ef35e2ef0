"""A real browser for the tests that look at what a reader would see."""

import os
import shutil
from urllib.parse import urlsplit

import pytest

ARGUMENTS = [
    "--headless",
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
]
LOOPBACK = {"127.0.0.1", "localhost", "::1"}


def pytest_collection_modifyitems(items):
    """Browser tests last: the driver's event loop stays alive in this thread and would be in the way of other loops."""
    items.sort(key=lambda item: item.get_closest_marker("browser") is not None)


def find_chromium():
    names = ("chromium", "chromium-browser", "google-chrome")
    return next(filter(None, map(shutil.which, names)), None)


@pytest.fixture(scope="session")
def chromium():
    """A running Chromium (playwright's Browser). Without one the test is skipped with the reason, or fails when
    MASSDASH_REQUIRE_BROWSER=1."""
    path = find_chromium()
    if path is None:
        reason = "no Chromium found (looked for chromium, chromium-browser and google-chrome)"
        if os.environ.get("MASSDASH_REQUIRE_BROWSER") == "1":
            pytest.fail(reason)
        pytest.skip(reason)
    from playwright.sync_api import sync_playwright

    with sync_playwright() as driver:
        browser = driver.chromium.launch(executable_path=path, args=ARGUMENTS)
        yield browser
        browser.close()


def leaves_the_machine(url):
    parts = urlsplit(url)
    return parts.scheme not in ("data", "blob", "about", "file") and parts.hostname not in LOOPBACK


def watch(page):
    """A list that fills with everything a page must not do; websockets count as requests."""
    wrongs = []

    def note_request(url):
        if leaves_the_machine(url):
            wrongs.append(f"request left the machine: {url}")

    page.on("console", lambda said: wrongs.append(f"console: {said.text}") if said.type == "error" else None)
    page.on("pageerror", lambda error: wrongs.append(f"page error: {error}"))
    page.on("request", lambda request: note_request(request.url))
    page.on("websocket", lambda socket: note_request(socket.url))
    return wrongs


@pytest.fixture
def page(chromium):
    """A fresh page of its own context; the test fails at the end when the page logged an error, threw one, or asked
    anything of another machine. Expected errors are taken out of ``page.wrongs`` by the test that expects them."""
    context = chromium.new_context(viewport={"width": 1200, "height": 900})
    page = context.new_page()
    page.wrongs = watch(page)
    yield page
    context.close()
    assert page.wrongs == []
