"""Charts in a page, for the tests that use them."""

import pytest
from bare import open_charts
from plots import Plot, curves, plane


@pytest.fixture
def plot(page):
    open_charts(page, [curves(), plane()], exact=True)
    return Plot(page)


@pytest.fixture
def field(plot):
    return Plot(plot.page, "plane")
