"""Which kernels pages get: this very Python, started lean, and for the first page one that is already up."""

import asyncio

from ipykernel.kernelspec import RESOURCES, get_kernel_dict
from jupyter_client.kernelspec import NATIVE_KERNEL_NAME, KernelSpec, KernelSpecManager, NoSuchKernel
from jupyter_server.services.kernels.kernelmanager import AsyncMappingKernelManager
from traitlets import Dict, Unicode

# No history on disk, and no start-up files of the user, which could print, draw or fail.
LEAN = ["--HistoryManager.enabled=False", "--InteractiveShell.cache_size=0", "--log-level=ERROR"]


class OnlyThisPython(KernelSpecManager):
    """Offers exactly one kernel, the interpreter that runs the server, whatever kernels the user has installed."""

    environment = Dict(config=True, help="Environment variables of every kernel, on top of the server's own.")
    first_line = Unicode("", config=True, help="Code that every kernel runs when it starts, for example imports.")

    def find_kernel_specs(self):
        return {NATIVE_KERNEL_NAME: RESOURCES}

    def get_kernel_spec(self, kernel_name):
        if kernel_name != NATIVE_KERNEL_NAME:
            raise NoSuchKernel(kernel_name)
        start = [f"--IPKernelApp.exec_lines={self.first_line}"] if self.first_line else []
        arguments = [*LEAN, f"--ipython-dir={self.parent.connection_dir}", *start]
        # "$" would be taken for a variable to be filled in.
        told = {name: value.replace("$", "$$") for name, value in self.environment.items()}
        return KernelSpec(resource_dir=RESOURCES, env=told, **get_kernel_dict(extra_arguments=arguments))


class OneAhead(AsyncMappingKernelManager):
    """Starts the first page's kernel while the user's browser still opens."""

    _ahead = None

    def start_one_ahead(self):
        """To be called once, in the running event loop."""
        self._ahead = asyncio.ensure_future(super().start_kernel(kernel_name=NATIVE_KERNEL_NAME, path=""))

    async def start_kernel(self, **kwargs):
        ahead, self._ahead = self._ahead, None
        if ahead is not None:
            kernel_id = await ahead
            # It is gone again when nobody came for a long time.
            if kernel_id in self and await self.get_kernel(kernel_id).is_alive():
                return kernel_id
        return await super().start_kernel(**kwargs)
