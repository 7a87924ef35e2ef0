"""The listening socket: loopback only, and either the wished port or the next free one."""

import errno
import socket

from ..errors import InputError, refuse

LOOPBACK = "127.0.0.1"
FIRST_PORT = 8630
PORTS_TRIED = 20
ALLOWED = "a free port from 1024 to 65535"


def bind(port=None):
    """A one-element list with a bound, listening TCP socket on the loopback interface.

    ``port`` None: the first free one of a short range (so that the address is usually the same), else any. A given
    port is taken or refused with InputError, never replaced.
    """
    if port is not None:
        return [_bind_wished(port)]
    for candidate in (*range(FIRST_PORT, FIRST_PORT + PORTS_TRIED), 0):
        try:
            return [_listen(candidate)]
        except OSError as error:
            if error.errno not in (errno.EADDRINUSE, errno.EACCES) or candidate == 0:
                raise


def _bind_wished(port):
    if not (type(port) is int and 1024 <= port <= 65535):
        raise refuse("port", port, ALLOWED)
    try:
        return _listen(port)
    except OSError as error:
        sentence = f"port: {port} is in use or not permitted; give {ALLOWED}, or none"
        raise InputError(sentence, name="port", got=port, allowed=ALLOWED) from error


def _listen(port):
    listening = socket.create_server((LOOPBACK, port))
    listening.setblocking(False)
    return listening
