"""Servers as a user starts them: real processes, spoken to through the address they print."""

import contextlib
import http.client
import os
import re
import signal
import subprocess
import sys
import tempfile
import time
from dataclasses import dataclass
from pathlib import Path
from urllib.parse import parse_qs, urlsplit

ROOT = Path(__file__).resolve().parents[1]
NOTEBOOK = ROOT / "notebooks" / "dashboard.ipynb"
STANDIN = [sys.executable, str(ROOT / "tests" / "browser" / "standin" / "serve.py")]
DASHBOARD = [sys.executable, "-m", "massdash", "dashboard", "--no-browser"]
PATIENCE = 60  # seconds; only ever waited for when something is broken


@dataclass
class Running:
    """A server process, its printed address, and the files that collect what it says."""

    process: subprocess.Popen
    address: str
    out: Path
    err: Path

    @property
    def port(self):
        return urlsplit(self.address).port

    @property
    def base(self):
        return f"http://127.0.0.1:{self.port}"

    @property
    def token(self):
        return parse_qs(urlsplit(self.address).query)["token"][0]

    def ask(self, path, method="GET", *, token=None, body=None, headers=()):
        """(status, headers, text) of one request; redirects are not followed."""
        sent = dict(headers) | ({"Authorization": f"token {token}"} if token else {})
        connection = http.client.HTTPConnection("127.0.0.1", self.port, timeout=PATIENCE)
        with contextlib.closing(connection):
            connection.request(method, path, body, sent)
            answer = connection.getresponse()
            return answer.status, answer.headers, answer.read().decode()

    def kernels(self):
        """Process ids of this server's kernels."""
        return [pid for pid in children(self.process.pid) if "ipykernel" in command(pid)]

    def interrupt(self):
        """Ctrl-C; returns the exit status."""
        self.process.send_signal(signal.SIGINT)
        return self.process.wait(PATIENCE)


@contextlib.contextmanager
def started(arguments, *, address=r"http://127\.0\.0\.1:\d+/\S*", cwd=ROOT, **environment):
    """A Running server for the duration of a block; it is ended with Ctrl-C."""
    told = {**os.environ, "PYTHONPATH": str(ROOT), **environment}
    with tempfile.TemporaryDirectory() as folder:
        out, err = Path(folder, "out"), Path(folder, "err")
        with out.open("w") as to_out, err.open("w") as to_err:
            process = subprocess.Popen(arguments, stdout=to_out, stderr=to_err, env=told, cwd=cwd)
        try:
            yield Running(process, _printed(address, process, out, err), out, err)
        finally:
            end(process)


def end(process):
    """Ctrl-C, and more when that does not help."""
    for ending in (signal.SIGINT, signal.SIGINT, signal.SIGKILL):
        if process.poll() is None:
            process.send_signal(ending)
            with contextlib.suppress(subprocess.TimeoutExpired):
                process.wait(20)


def _printed(address, process, out, err):
    def said():
        return out.read_text() + err.read_text()

    wait_until(lambda: re.search(address, said()) or process.poll() is not None, "an address printed")
    found = re.search(address, said())
    if not found:
        raise AssertionError(f"no address was printed, status {process.poll()}: {said()}")
    return found[0]


def children(pid):
    listed = subprocess.run(["ps", "-o", "pid=", "--ppid", str(pid)], capture_output=True, text=True, check=False)
    return [int(word) for word in listed.stdout.split()]


def command(pid):
    try:
        return Path(f"/proc/{pid}/cmdline").read_text().replace("\0", " ")
    except FileNotFoundError:
        return ""


def listening(pid):
    """(address, port) of every TCP socket, old or new family, on which a process listens."""
    links = [os.readlink(entry) for entry in Path(f"/proc/{pid}/fd").iterdir() if entry.is_symlink()]
    inodes = {link[8:-1] for link in links if link.startswith("socket:[")}
    rows = [line.split() for name in ("tcp", "tcp6") for line in Path(f"/proc/net/{name}").read_text().splitlines()[1:]]
    places = [row[1].split(":") for row in rows if row[3] == "0A" and row[9] in inodes]
    return [(_readable(address), int(port, 16)) for address, port in places]


def _readable(address):
    if len(address) != 8:
        return f"[{address}]"
    return ".".join(str(byte) for byte in reversed(bytes.fromhex(address)))


def wait_until(holds, what):
    """Returns as soon as ``holds()`` is true; fails with ``what`` when that never happens."""
    end = time.monotonic() + PATIENCE
    while not holds():
        assert time.monotonic() < end, f"still not: {what}"
        time.sleep(0.1)
