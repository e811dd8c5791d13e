"""The ordinary kernel, in the conditions of the warm helper: this interpreter, no start-up files, no chatter."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from ipykernel.kernelspec import get_kernel_dict
from jupyter_client.kernelspec import KernelSpec
from jupyter_client.manager import AsyncKernelManager

from calcbook.run.helper import CALCULATION_ENVIRONMENT


class OwnKernelManager(AsyncKernelManager):  # type: ignore[misc]
    """Starts the kernel of this interpreter, whatever a kernel named "python3" may be on this machine."""

    @property
    def kernel_spec(self) -> KernelSpec:
        """The kernel's command and environment."""
        return KernelSpec(**get_kernel_dict(), env=dict(CALCULATION_ENVIRONMENT))


def kernel_options(empty_folder: Path) -> dict[str, Any]:
    """The options that papermill's own engine needs; `empty_folder` stands in for the user's IPython folder."""
    arguments = [f"--ipython-dir={empty_folder}", "--log-level=CRITICAL"]
    return {"kernel_manager_class": OwnKernelManager, "extra_arguments": arguments}
