"""Messages of the page are to be handled while a cell runs, in the thread that the page chose.

JupyterLab sends a widget's messages to a thread of their own (a subshell), so that they are answered while a cell
runs. From version 7.4 on, ipykernel sends them to whichever thread last used the comm instead, because that thread may
be waiting for a reply; a widget made in a cell would then stand still as long as any cell runs. The desk waits for no
reply and is safe in every thread, so it lets go of that claim.
"""

from __future__ import annotations

from typing import Any

_CLAIM = "_reply_subshell_id"


def release(comm: Any) -> None:
    """Let the next message on ``comm`` go where the page sends it; nothing to do for kernels that do so anyway."""
    if hasattr(comm, "__dict__"):
        vars(comm).pop(_CLAIM, None)
