"""Talking to a kernel's socket without a browser, politely and otherwise."""

import contextlib
import json
import re
import uuid

import websocket

PROTOCOL = "v1.kernel.websocket.jupyter.org"


def open_page(running):
    """Load the page without a browser; returns the id of its kernel."""
    status, _, text = running.ask("/", token=running.token)
    assert status == 200
    return re.search(r'"kernelId": "([\w-]+)"', text)[1]


@contextlib.contextmanager
def connected(running, kernel, *, token=None, protocols=(PROTOCOL,), origin=None):
    """A websocket to a kernel; raises WebSocketBadStatusException when the server declines."""
    headers = [f"Authorization: token {token}"] if token else []
    socket = websocket.create_connection(
        f"ws://127.0.0.1:{running.port}/api/kernels/{kernel}/channels?session_id={uuid.uuid4().hex}",
        subprotocols=list(protocols),
        header=headers,
        origin=origin or running.base,
        timeout=30,
    )
    try:
        yield socket
    finally:
        socket.shutdown()


def frame(kind, content, *, channel="shell"):
    """A message as the page frames it: count, offsets, channel, header, parent, metadata, content."""
    header = {"msg_id": uuid.uuid4().hex, "msg_type": kind, "session": "s", "username": "", "version": "5.3"}
    parts = [channel.encode(), *(json.dumps(part).encode() for part in (header, {}, {}, content))]
    count = len(parts) + 1
    offsets = [8 * (count + 1)]
    for part in parts:
        offsets.append(offsets[-1] + len(part))
    return b"".join(number.to_bytes(8, "little") for number in (count, *offsets)) + b"".join(parts)


def answers(socket, until="comm_info_reply", grace=0.3):
    """Message types that arrive up to one of the kind ``until`` and a little longer, and all that was said as text."""
    kinds, said = [], b""
    socket.settimeout(20)
    while True:
        try:
            got = socket.recv()
        except (websocket.WebSocketTimeoutException, websocket.WebSocketConnectionClosedException):
            break
        got = got if isinstance(got, bytes) else got.encode()
        kinds += re.findall(r'"msg_type": ?"(\w+)"', got.decode(errors="replace"))
        said += got
        if until in kinds:
            socket.settimeout(grace)
    return kinds, said.decode(errors="replace")
