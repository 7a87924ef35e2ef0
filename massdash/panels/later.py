"""Work that may wait until a person pauses."""

import asyncio


class Later:
    """Runs ``action`` once, ``delay`` seconds after the last ``soon``; at once where no event loop runs."""

    def __init__(self, action, delay=0.15):
        self._action, self._delay, self._waiting = action, delay, None

    def soon(self):
        """Ask for the action; asking again starts the wait anew."""
        self.cancel()
        try:
            loop = asyncio.get_running_loop()
        except RuntimeError:
            self._action()
            return
        self._waiting = loop.call_later(self._delay, self._run)

    def cancel(self):
        """Forget what was asked for."""
        if self._waiting is not None:
            self._waiting.cancel()
            self._waiting = None

    def _run(self):
        self._waiting = None
        self._action()
