"""Running servers for the tests of the dashboard in a browser."""

import socket
import sys
from dataclasses import replace

import pytest
from running import DASHBOARD, NOTEBOOK, STANDIN, started

TOKEN = "token-of-the-tests"
LAB = [
    *(
        sys.executable,
        "-m",
        "jupyter",
        "lab",
        "--no-browser",
        "--allow-root",
        "--ip=127.0.0.1",
        f"--IdentityProvider.token={TOKEN}",
    ),
    # Nothing is asked of other hosts: no news, no look for updates, no catalogue of extensions.
    *("--LabApp.news_url=None", "--LabApp.check_for_updates_class=jupyterlab.NeverCheckForUpdate"),
    *("--LabApp.extension_manager=readonly", "--LabApp.expose_app_in_browser=False"),
]


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


@pytest.fixture(scope="session")
def dashboard():
    """``massdash dashboard`` as a user starts it."""
    with started(DASHBOARD) as running:
        yield running


def free_port():
    """A port that nobody listens on; another server of this kind may run on the usual one."""
    with socket.create_server(("127.0.0.1", 0)) as listening:
        return listening.getsockname()[1]


@pytest.fixture(scope="session")
def lab(tmp_path_factory):
    """JupyterLab in a folder with a copy of the dashboard's notebook, without any settings of the user."""
    folder, home = tmp_path_factory.mktemp("notebooks"), tmp_path_factory.mktemp("home")
    (folder / NOTEBOOK.name).write_bytes(NOTEBOOK.read_bytes())
    settings = home / "lab" / "user-settings" / "@jupyterlab" / "apputils-extension"
    settings.mkdir(parents=True)
    (settings / "notification.jupyterlab-settings").write_text('{"fetchNews": "false", "checkForUpdates": false}')
    own = dict.fromkeys(
        ("HOME", "JUPYTER_CONFIG_DIR", "JUPYTER_DATA_DIR", "IPYTHONDIR", "JUPYTER_RUNTIME_DIR"), str(home)
    )
    port = free_port()
    where = [f"--port={port}", "--ServerApp.port_retries=0"]
    with started([*LAB, *where], address=rf"http://127\.0\.0\.1:{port}/lab", cwd=folder, **own) as running:
        yield replace(running, address=f"{running.address}/tree/{NOTEBOOK.name}?token={TOKEN}")
