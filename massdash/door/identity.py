"""Who may enter: whoever brings the token of the printed address, and for reading and talking to a kernel only."""

from jupyter_server.auth.authorizer import Authorizer
from jupyter_server.auth.decorator import allow_unauthenticated
from jupyter_server.auth.identity import IdentityProvider
from jupyter_server.base.handlers import JupyterHandler
from tornado import web


class AskForAddress(JupyterHandler):
    """Where visitors without a token end: there is no form, only a sentence."""

    @allow_unauthenticated
    def get(self):
        raise web.HTTPError(403, "Open the whole address that the program printed when it started, token included.")


class TokenOnly(IdentityProvider):
    """The token once, then a signed cookie that scripts cannot read; no password, no login form."""

    def get_handlers(self):
        return [(r"/login", AskForAddress)]


class ReadAndTalk(Authorizer):
    """Reading, and the socket to a kernel; no kernel is deleted, restarted or interrupted from outside."""

    def is_authorized(self, handler, user, action, resource):
        return action == "read" or (action == "execute" and resource == "kernels")
