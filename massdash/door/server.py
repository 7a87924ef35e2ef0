"""The server: voila on its own, for one notebook, on sockets that are already bound to the loopback interface."""

import secrets
import shutil
import signal
import sys
import threading
import webbrowser

from .quick import without_unused_parts

with without_unused_parts():
    import jinja2
    import nbformat
    import tornado.ioloop
    from jupyter_core.utils import run_sync
    from tornado.httpserver import HTTPServer
    from voila.app import Voila
    from voila.tornado.handler import TornadoVoilaHandler

from .handlers import Page, Pulse, Ticket
from .settings import TEMPLATES, settings

OURS_INSTEAD = {TornadoVoilaHandler: Page}
KERNEL_ID = r"(?P<kernel_id>\w+-\w+-\w+-\w+-\w+)"


def serve(notebook, sockets, *, environment, open_browser, first_line=""):
    """Show ``notebook`` until Ctrl-C or SIGTERM; print the address, with its token, as one line on stdout.

    ``sockets`` are bound, listening sockets; ``environment`` is added to that of the kernels, which start by running
    ``first_line``.
    """
    door = Door(config=settings(notebook, environment, first_line), sockets=sockets, wants_browser=open_browser)
    door.initialize([])
    signal.signal(signal.SIGINT, door._handle_signal_stop)
    door.start()


class Door(Voila):
    """Voila with our page in front of its templates, our addresses beside its own, and sockets given from outside."""

    def __init__(self, *, sockets, wants_browser, **traits):
        super().__init__(**traits)
        self.sockets, self.wants_browser, self.tickets = sockets, wants_browser, set()

    def setup_template_dirs(self):
        super().setup_template_dirs()
        self.template_paths.insert(0, str(TEMPLATES))

    def init_settings(self):
        made = super().init_settings()
        for key in ("jinja2_env", "voila_jinja2_env"):
            ours = jinja2.FileSystemLoader(str(TEMPLATES))
            made[key].loader = jinja2.ChoiceLoader([ours, made[key].loader])
        self.contents_manager.notary.sign(nbformat.read(self.notebook_path, as_version=4))
        return made

    def init_handlers(self):
        ours = [(rf"/door/pulse/{KERNEL_ID}", Pulse), (r"/door/in/([\w-]+)", Ticket, {"tickets": self.tickets})]
        voila = super().init_handlers()
        return ours + [(path, OURS_INSTEAD.get(kind, kind), *options) for path, kind, *options in voila]

    def listen(self):
        HTTPServer(self.app).add_sockets(self.sockets)
        self.ip, self.port = self.sockets[0].getsockname()[:2]
        self.ioloop = tornado.ioloop.IOLoop.current()
        self.ioloop.add_callback(self.kernel_manager.start_one_ahead)
        self.announce()
        try:
            self.ioloop.start()
        finally:
            self.stop()

    def stop(self):
        run_sync(self.kernel_manager.shutdown_all)(now=True)  # a page's kernel keeps nothing that could be lost
        shutil.rmtree(self.connection_dir)

    def announce(self):
        """Say where the dashboard is, and open it when wished."""
        print("The dashboard is open at this address; Ctrl-C ends it.", file=sys.stderr)
        print(f"{self.connection_url}?token={self.token}", flush=True)
        if self.wants_browser:
            ticket = secrets.token_urlsafe(24)
            self.tickets.add(ticket)
            address = f"{self.connection_url}door/in/{ticket}"
            threading.Thread(target=webbrowser.open, args=[address], daemon=True).start()
