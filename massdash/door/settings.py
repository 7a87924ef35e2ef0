"""How voila is set up here. Every setting is one of its own; the reason stands beside those that are not plain."""

import os
import secrets
from pathlib import Path

from traitlets.config import Config

from .channel import WidgetChannel
from .identity import ReadAndTalk, TokenOnly
from .kernels import OneAhead, OnlyThisPython

TEMPLATES = Path(__file__).resolve().parent / "templates"
EXTENSIONS = ["@jupyter-widgets/jupyterlab-manager", "@voila-dashboards/widgets-manager8", "anywidget"]

# Nothing comes from or goes to another host. Widgets are evaluated as modules from blobs and set their styles inline.
CONTENT_SECURITY_POLICY = "; ".join(
    [
        "default-src 'none'",
        "script-src 'self' 'unsafe-inline' 'unsafe-eval' blob:",
        "style-src 'self' 'unsafe-inline' blob:",
        "img-src 'self' data: blob:",
        "font-src 'self' data:",
        "connect-src 'self' blob:",
        "worker-src 'self' blob:",
        "base-uri 'none'",
        "form-action 'none'",
        "frame-ancestors 'none'",
    ]
)
HEADERS = {
    "Content-Security-Policy": CONTENT_SECURITY_POLICY,
    "Referrer-Policy": "no-referrer",
    "X-Frame-Options": "DENY",
    "Cross-Origin-Opener-Policy": "same-origin",
    "Cross-Origin-Resource-Policy": "same-origin",
}

# A scenario file is at most 1 MiB; larger ones shall reach the sentence that refuses them, up to a point.
LARGEST_FRAME = 64 * 1024 * 1024
CULL_AFTER, CULL_EVERY = 300, 30  # seconds


def settings(notebook, environment, first_line=""):
    """The whole configuration for one notebook; ``environment`` and ``first_line`` are for its kernels."""
    config = Config()
    _server(config.Voila, notebook)
    _page(config.VoilaConfiguration)
    _kernels(config)
    config.OnlyThisPython.environment = environment
    config.OnlyThisPython.first_line = first_line
    config.TokenOnly.cookie_options = {"samesite": "Strict"}
    # Showing a notebook leaves no traces among the user's files.
    config.NotebookNotary.db_file = ":memory:"
    config.NotebookNotary.secret = secrets.token_bytes(32)
    return config


def _server(voila, notebook):
    voila.notebook_path = str(notebook)
    voila.config_file_paths = []  # a stray voila.json must not open what is closed here
    voila.token = secrets.token_urlsafe(24)
    voila.identity_provider_class = TokenOnly
    voila.authorizer_class = ReadAndTalk
    voila.kernel_websocket_connection_class = WidgetChannel
    voila.log_level = "WARN"
    voila.tornado_settings = {
        "headers": HEADERS,
        "websocket_max_message_size": LARGEST_FRAME,
        "websocket_compression_options": None,
        "xsrf_cookie_kwargs": {"samesite": "Strict"},
        "ws_ping_interval": 0,  # within one machine a broken connection is noticed without asking
    }


def _page(voila):
    voila.template = "lab"
    voila.allow_template_override = "NO"
    voila.allow_theme_override = "NO"
    voila.strip_sources = True
    voila.show_tracebacks = False
    voila.file_allowlist = []
    voila.extension_allowlist = EXTENSIONS
    voila.kernel_spec_manager_class = OnlyThisPython
    voila.multi_kernel_manager_class = OneAhead


def _kernels(config):
    if os.name == "posix":
        # Kernels on TCP ports could be overheard by other users of the machine. The names of sockets must be short.
        config.KernelManager.transport = "ipc"
        config.Voila.connection_dir_root = "/tmp"
    # A kernel that was restarted is empty: the page would look alive and be dead. It is told to reload instead.
    config.KernelManager.autorestart = False
    config.MappingKernelManager.cull_idle_timeout = CULL_AFTER
    config.MappingKernelManager.cull_interval = CULL_EVERY
    config.MappingKernelManager.cull_connected = False  # a tab left open overnight still works in the morning
