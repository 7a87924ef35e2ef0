"""`python -m massdash` is the command `massdash`."""

import sys

from massdash.cli import main

if __name__ == "__main__":
    sys.exit(main())
