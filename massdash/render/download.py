"""Files made in memory, handed to the browser."""

import anywidget
import traitlets

from . import bundle, wire


class Download(anywidget.AnyWidget):
    """An invisible widget; ``offer`` makes the browser save a file. The browser writes nothing back."""

    _esm = bundle.download_module()
    parcel = traitlets.Dict().tag(sync=True)

    def offer(self, name, data, mime):
        """Hand over ``data`` (bytes) as a file called ``name``."""
        number = self.parcel.get("number", 0) + 1
        self.parcel = {"number": number, "name": name, "mime": mime, "data": data}

    def set_state(self, sync_data):
        """Takes nothing from the browser."""
        super().set_state(wire.inputs_only(sync_data, set()))
