"""Running servers for the tests of the dashboard in a browser."""

import pytest
from running import STANDIN, started


@pytest.fixture(scope="session")
def standin():
    """The server with a stand-in notebook, for what concerns the server alone."""
    with started(STANDIN) as running:
        yield running


@pytest.fixture
def own_standin():
    """The same, for one test that ends or harms it."""
    with started(STANDIN) as running:
        yield running
