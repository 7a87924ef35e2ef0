"""What the socket passes on to a kernel, frame by frame."""

import pytest
from sockets import frame

from massdash.door.channel import why_not

CONTROL = {"target_name": "jupyter.widget.control"}


@pytest.mark.parametrize(
    ("kind", "content"),
    [
        ("kernel_info_request", {}),
        ("comm_info_request", {"target_name": "jupyter.widget"}),
        ("comm_msg", {"comm_id": "x", "data": {}}),
        ("comm_close", {"comm_id": "x"}),
        ("comm_open", CONTROL),
        ("comm_open", {"target_name": "jupyter.widget"}),
    ],
)
def test_widget_traffic_passes(kind, content):
    assert why_not(frame(kind, content)) == ""
    assert why_not(frame(kind, content) + b"a buffer of any length") == ""


@pytest.mark.parametrize(
    ("bad", "reason"),
    [
        (frame("comm_msg", {}, channel="control"), "channel 'control'"),
        (frame("comm_msg", {}, channel="stdin"), "channel 'stdin'"),
        (frame("execute_request", {"code": "1"}), "type 'execute_request'"),
        (frame("shutdown_request", {}), "type 'shutdown_request'"),
        (frame("comm_open", {"target_name": "other"}), "comm target 'other'"),
        (frame("comm_open", {}), "comm target None"),
        (frame("comm_msg", [1]), "unreadable (AttributeError)"),
        ((2**62).to_bytes(8, "little"), "unreadable (ValueError)"),
        (b"", "unreadable (ValueError)"),
        ("text", "unreadable (TypeError)"),
    ],
)
def test_all_else_is_dropped_with_a_reason(bad, reason):
    assert why_not(bad) == reason
