"""Serve the stand-in notebook as ``massdash dashboard`` serves the real one; arguments are files to announce,
``--open`` opens a browser."""

import sys
from pathlib import Path

from massdash.app import kernel_environment
from massdash.door.address import bind
from massdash.door.server import serve

serve(
    Path(__file__).with_name("standin.ipynb"),
    bind(),
    environment=kernel_environment([name for name in sys.argv[1:] if name != "--open"]),
    first_line="import ipywidgets",
    open_browser="--open" in sys.argv,
)
