"""Work that may wait until a person pauses, or for a moment."""

import asyncio


class Later:
    """Runs ``action`` once, ``delay`` seconds after the last ``soon``, or after the first of them when it is not
    ``patient``; at once where no event loop runs."""

    def __init__(self, action, delay=0.15, *, patient=True):
        self._action, self._delay, self._patient, self._waiting = action, delay, patient, None

    def soon(self):
        """Ask for the action; a patient one then waits anew."""
        if self._waiting is not None and not self._patient:
            return
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
