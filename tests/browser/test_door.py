"""The server in front of the dashboard: who may enter, what may be said, and what stays behind."""

import html
import json
import re
import socket
import subprocess

import pytest
import websocket
from running import STANDIN, command, listening, started, wait_until
from sockets import PROTOCOL, answers, connected, frame, open_page


@pytest.fixture(scope="module")
def kernel(standin):
    return open_page(standin)


def test_prints_one_address_on_loopback_with_a_token(standin):
    assert re.fullmatch(r"http://127\.0\.0\.1:\d+/\?token=[\w-]{32}", standin.address)


def test_listens_on_loopback_only(standin, kernel):
    assert listening(standin.process.pid) == [("127.0.0.1", standin.port)]
    assert {address for pid in standin.kernels() for address, _ in listening(pid)} <= {"127.0.0.1"}


@pytest.mark.parametrize("token", [None, "wrong"])
def test_the_page_needs_the_token(standin, token):
    status, headers, _ = standin.ask("/", token=token)
    assert (status, headers["Location"]) == (302, "/login?next=%2F")
    status, _, text = standin.ask("/login", token=token)
    assert status == 403
    assert "token included" in text


@pytest.mark.parametrize("path", ["/api/kernels/{0}", "/door/pulse/{0}", "/voila/api/shutdown/{0}"])
def test_addresses_of_a_kernel_need_the_token(standin, kernel, path):
    method = "POST" if "shutdown" in path else "GET"
    assert standin.ask(path.format(kernel), method)[0] == 403


def test_the_socket_needs_the_token(standin, kernel):
    with pytest.raises(websocket.WebSocketBadStatusException, match="403"), connected(standin, kernel):
        pass


def test_the_socket_refuses_a_stranger_s_page(standin, kernel):
    cookie = standin.ask("/door/pulse/" + kernel, token=standin.token)[1]["Set-Cookie"].split(";")[0]
    address = f"ws://127.0.0.1:{standin.port}/api/kernels/{kernel}/channels"
    with pytest.raises(websocket.WebSocketBadStatusException, match="403"):
        websocket.create_connection(address, cookie=cookie, origin="http://elsewhere.example", subprotocols=[PROTOCOL])
    websocket.create_connection(address, cookie=cookie, origin=standin.base, subprotocols=[PROTOCOL]).close()


def test_the_cookie_is_out_of_reach_of_scripts(standin, kernel):
    cookie = standin.ask("/door/pulse/" + kernel, token=standin.token)[1]["Set-Cookie"]
    assert "HttpOnly" in cookie
    assert "SameSite=Strict" in cookie


@pytest.mark.parametrize("name", ["kernels", "contents", "sessions", "kernelspecs", "terminals", "status"])
def test_nothing_is_listed(standin, name):
    path = f"/api/{name}"
    status, headers, text = standin.ask(path, token=standin.token)
    assert status in (302, 404)
    if status == 302:
        status, _, text = standin.ask(headers["Location"], token=standin.token)
    assert status in (403, 404)
    assert "kernel" not in text


@pytest.mark.parametrize("name", ["standin.ipynb", "serve.py", "../conftest.py", "picture.svg"])
def test_no_file_is_served(standin, name):
    assert standin.ask(f"/voila/files/{name}", token=standin.token)[0] in (403, 404)


def test_sources_are_not_told(standin):
    text = standin.ask("/", token=standin.token)[2]
    assert "Stand-in" in text
    assert "setattr" not in text


def test_the_template_cannot_be_chosen_from_outside(standin):
    text = standin.ask("/?template=reveal&theme=dark", token=standin.token)[2]
    assert "reveal" not in text
    assert 'data-jp-theme-name="JupyterLab Light"' in text


@pytest.mark.parametrize("path", ["/", "/login", "/nowhere/x"])
def test_every_page_forbids_other_hosts(standin, path):
    policy = standin.ask(path, token=standin.token)[1]["Content-Security-Policy"]
    assert policy.startswith("default-src 'none'")
    assert not re.search(r"https?:|\*", policy)


def test_writing_needs_proof_of_origin(standin, kernel):
    cookie = standin.ask("/door/pulse/" + kernel, token=standin.token)[1]["Set-Cookie"].split(";")[0]
    for path, method in (("/voila/api/shutdown/" + kernel, "POST"), ("/api/kernels/" + kernel, "DELETE")):
        status, _, text = standin.ask(path, method, body="", headers={"Cookie": cookie})
        assert status == 403
        assert "_xsrf" in text
    assert standin.ask("/door/pulse/" + kernel, token=standin.token)[0] == 204


def test_kernels_are_not_deleted_through_the_api(standin, kernel):
    assert standin.ask("/api/kernels/" + kernel, "DELETE", token=standin.token)[0] == 403
    assert standin.ask("/door/pulse/" + kernel, token=standin.token)[0] == 204


def test_widgets_are_answered(standin, kernel):
    with connected(standin, kernel, token=standin.token) as channel:
        channel.send_binary(frame("comm_info_request", {"target_name": "jupyter.widget"}))
        assert "comm_info_reply" in answers(channel)[0]


@pytest.mark.parametrize(
    ("kind", "content", "channel"),
    [
        ("execute_request", {"code": "print(6 * 7, 'was run')", "silent": False}, "shell"),
        ("execute_request", {"code": "print(6 * 7, 'was run')", "silent": False}, "control"),
        ("inspect_request", {"code": "slider", "cursor_pos": 3, "detail_level": 1}, "shell"),
        ("complete_request", {"code": "sli", "cursor_pos": 3}, "shell"),
        ("history_request", {"hist_access_type": "tail", "n": 9}, "shell"),
        ("shutdown_request", {"restart": False}, "control"),
        ("shutdown_request", {"restart": False}, "shell"),
        ("debug_request", {"type": "request", "command": "debugInfo", "seq": 1}, "control"),
        ("comm_open", {"comm_id": "x", "target_name": "other", "data": {}}, "shell"),
    ],
)
def test_nothing_else_is_passed_to_the_kernel(standin, kernel, kind, content, channel):
    with connected(standin, kernel, token=standin.token) as opened:
        opened.send_binary(frame(kind, content, channel=channel))
        opened.send_binary(frame("comm_info_request", {}))
        kinds, said = answers(opened)
    assert "comm_info_reply" in kinds
    assert kind.replace("request", "reply") not in kinds
    assert "was run" not in said


UNREADABLE = {
    "endless count": (2**62).to_bytes(8, "little") + bytes(64),
    "too many parts": (40).to_bytes(8, "little") + bytes(64),
    "empty": b"",
    "noise": bytes(range(256)),
    "no content": frame("comm_msg", None),
    "content is a list": frame("comm_msg", [1]),
}


@pytest.mark.parametrize("name", UNREADABLE)
def test_unreadable_frames_harm_nobody(standin, kernel, name):
    with connected(standin, kernel, token=standin.token) as channel:
        channel.send_binary(UNREADABLE[name])
        channel.send_binary(frame("comm_info_request", {}))
        assert "comm_info_reply" in answers(channel)[0]


def test_text_frames_harm_nobody(standin, kernel):
    with connected(standin, kernel, token=standin.token) as channel:
        channel.send(json.dumps({"channel": "shell", "header": {"msg_type": "execute_request"}, "content": {}}))
        channel.send_binary(frame("comm_info_request", {}))
        assert "comm_info_reply" in answers(channel)[0]


def test_the_older_framing_is_refused_and_the_server_lives(standin, kernel):
    with connected(standin, kernel, token=standin.token, protocols=()) as channel:
        channel.send_binary((2**62).to_bytes(8, "little") + bytes(64))
        assert channel.recv_data(control_frame=True) == (websocket.ABNF.OPCODE_CLOSE, b"\x11\x30unknown protocol")
    assert standin.ask("/door/pulse/" + kernel, token=standin.token)[0] == 204


def test_the_pulse_tells_living_dead_and_unknown(own_standin):
    kernel = open_page(own_standin)
    pulse = "/door/pulse/" + kernel

    def told():
        return own_standin.ask(pulse, token=own_standin.token)[0]

    assert told() == 204
    subprocess.run(["kill", "-9", *map(str, own_standin.kernels())], check=True)
    wait_until(lambda: told() == 410, "told that the kernel died")
    assert own_standin.ask("/door/pulse/0-0-0-0-0", token=own_standin.token)[0] == 404


def test_files_are_told_to_the_kernel_as_they_are():
    name = '/tmp/$HOME and ${x} "quoted" é.yaml'
    with started([*STANDIN, name]) as running:
        page = running.ask("/", token=running.token)[2]
    assert f"told to open {json.dumps([name])}\n" in html.unescape(page)


def test_ctrl_c_ends_it_and_its_kernels():
    with started(STANDIN) as running:
        open_page(running)
        kernels = running.kernels()
        assert kernels
        assert running.interrupt() == 0
        assert [command(pid) for pid in kernels] == ["" for _ in kernels]
        with pytest.raises(ConnectionRefusedError):
            socket.create_connection(("127.0.0.1", running.port))
        assert running.out.read_text() == running.address + "\n"
        assert running.err.read_text() == "The dashboard is open at this address; Ctrl-C ends it.\n"


def test_the_opened_browser_gets_an_address_that_works_once(tmp_path):
    browser, got = tmp_path / "browser", tmp_path / "got"
    browser.write_text(f'#!/bin/sh\nprintf %s "$1" > "{got}.part"; mv "{got}.part" "{got}"\n')
    browser.chmod(0o700)
    with started([*STANDIN, "--open"], BROWSER=str(browser)) as running:
        wait_until(got.exists, "a browser was opened")
        path = got.read_text().removeprefix(running.base)
        assert running.token not in path
        status, headers, _ = running.ask(path)
        assert (status, headers["Location"]) == (302, f"/?token={running.token}")
        assert running.ask(path)[0] == 403
