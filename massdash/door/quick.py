"""Leave out of the server's start what it has no use for."""

import contextlib
import sys

# Checking international addresses in the server's own event schemas: optional there, and its grammar takes longer to
# build than the whole server takes to start.
UNUSED = "rfc3987_syntax"


@contextlib.contextmanager
def without_unused_parts():
    """While this holds, importing the unused parts fails as if they were not installed, which their users expect."""
    if UNUSED in sys.modules:
        yield
        return
    sys.modules[UNUSED] = None
    try:
        yield
    finally:
        del sys.modules[UNUSED]
