"""The socket between a page and its kernel."""

import json

from jupyter_server.services.kernels.connection.base import deserialize_msg_from_ws_v1
from jupyter_server.services.kernels.connection.channels import ZMQChannelsWebsocketConnection

PROTOCOL = "v1.kernel.websocket.jupyter.org"
WIDGET_TYPES = frozenset({"kernel_info_request", "comm_info_request", "comm_open", "comm_msg", "comm_close"})
WIDGET_TARGETS = frozenset({"jupyter.widget", "jupyter.widget.control"})
WRONG_PROTOCOL = 4400


class WidgetChannel(ZMQChannelsWebsocketConnection):
    """Carries widget traffic and nothing else.

    Small frames are sent at once: waiting for more to send costs a slider about 40 ms. Only the current framing is
    spoken, since the server reads every binary frame as such and one in the older framing would stop it for good.
    """

    def connect(self):
        if self.subprotocol != PROTOCOL:
            self.log.warning("refused a socket that does not speak %s", PROTOCOL)
            self.websocket_handler.close(WRONG_PROTOCOL, "unknown protocol")
            return _nothing()
        self.websocket_handler.set_nodelay(True)
        return super().connect()

    def handle_incoming_message(self, incoming_msg):
        reason = why_not(incoming_msg)
        if reason:
            self.log.warning("dropped a message from the page: %s", reason)
            return
        super().handle_incoming_message(incoming_msg)


async def _nothing():
    """What is awaited when nothing was connected."""


def why_not(frame):
    """Why a frame from a page is not passed on, or "" when it is."""
    try:
        channel, kind, target = _read(frame)
    except Exception as error:  # whatever a stranger sends must not reach the server's loop
        return f"unreadable ({type(error).__name__})"
    if channel != "shell":
        return f"channel {channel!r}"
    if kind not in WIDGET_TYPES:
        return f"type {kind!r}"
    if kind == "comm_open" and target not in WIDGET_TARGETS:
        return f"comm target {target!r}"
    return ""


def _read(frame):
    # The frame begins with the number of its parts; the parser would believe any number and count up to it.
    parts_claimed = int.from_bytes(frame[:8], "little")
    if not 8 * (parts_claimed + 1) <= len(frame):
        raise ValueError("more parts than bytes")
    channel, parts = deserialize_msg_from_ws_v1(frame)
    content = json.loads(parts[3])
    return channel, json.loads(parts[0])["msg_type"], content.get("target_name")
