"""Starting the dashboard: what is refused before anything runs, ports, and machines without a screen."""

import socket

import pytest

from massdash import app
from massdash.door import address
from massdash.errors import InputError


@pytest.mark.parametrize("port", [0, 80, 1023, 65536, -1, 8630.0, True])
def test_only_a_plain_port_is_taken(port):
    with pytest.raises(InputError, match=r"^port: .* give a free port from 1024 to 65535$"):
        address.bind(port)


def test_a_busy_port_is_refused_when_it_was_asked_for():
    with socket.create_server(("127.0.0.1", 0)) as other:
        port = other.getsockname()[1]
        with pytest.raises(InputError, match=f"^port: {port} is in use or not permitted; give a free port"):
            address.bind(port)


def test_without_a_wish_the_next_free_port_is_taken(monkeypatch):
    with socket.create_server(("127.0.0.1", 0)) as other:
        monkeypatch.setattr(address, "FIRST_PORT", other.getsockname()[1])
        (listening,) = address.bind()
        with listening:
            assert listening.getsockname()[0] == "127.0.0.1"
            assert listening.getsockname()[1] != address.FIRST_PORT


@pytest.mark.parametrize(
    ("content", "said"),
    [
        (None, "existing scenario file"),
        ("massdash: 1\nmass: .nan solMass\n", "mass"),
        ("massdash: 1\nweight: 1\n", "weight"),
    ],
)
def test_a_bad_file_is_refused_before_anything_starts(tmp_path, monkeypatch, content, said):
    file = tmp_path / "star.yaml"
    if content is not None:
        file.write_text(content)
    monkeypatch.setattr(address, "bind", lambda port: pytest.fail("a server was about to start"))
    with pytest.raises(InputError, match=said):
        app.run_dashboard([str(file)])


@pytest.mark.parametrize(("display", "wayland", "seen"), [("", "", False), (":0", "", True), ("", "wayland-0", True)])
def test_a_screen_is_noticed(monkeypatch, display, wayland, seen):
    monkeypatch.setattr(app.sys, "platform", "linux")
    monkeypatch.setenv("DISPLAY", display)
    monkeypatch.setenv("WAYLAND_DISPLAY", wayland)
    assert app.has_screen() is seen


def test_the_notebook_is_found_and_short():
    text = app.dashboard_notebook().read_text()
    assert "dashboard()" in text
    assert '"outputs": []' in text
