"""The server's own few addresses, beside those that voila brings."""

from jupyter_server.auth.decorator import allow_unauthenticated
from jupyter_server.base.handlers import APIHandler, JupyterHandler
from tornado import web
from voila.tornado.handler import TornadoVoilaHandler


class Page(TornadoVoilaHandler):
    """The dashboard itself.

    Reading ``xsrf_token`` sets the cookie that proves where a request comes from. Without it the message that a
    closing tab sends, "end my kernel", is refused, and every kernel stays behind. So no check has to be lifted.
    """

    async def prepare(self):
        await super().prepare()
        self.xsrf_token  # noqa: B018


class Pulse(APIHandler):
    """204 while a kernel lives, 410 when it has died, 404 when there never was one or it was ended."""

    _track_activity = False

    @web.authenticated
    async def get(self, kernel_id):
        if kernel_id not in self.kernel_manager:
            raise web.HTTPError(404)
        alive = await self.kernel_manager.get_kernel(kernel_id).is_alive()
        self.set_status(204 if alive else 410)
        self.finish()


class Ticket(JupyterHandler):
    """A way in that works once.

    A browser that is started gets its address on the command line, where everybody on the machine can read it; this
    one is worthless after the first use, and only then the token is told.
    """

    def initialize(self, tickets):
        self.tickets = tickets

    @allow_unauthenticated
    def get(self, ticket):
        if ticket not in self.tickets:
            raise web.HTTPError(403, "This address has been used. Open the one that the program printed.")
        self.tickets.remove(ticket)
        self.redirect(f"{self.base_url}?token={self.identity_provider.token}")
