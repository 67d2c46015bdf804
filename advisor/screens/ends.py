"""Orderly ends: a terminated or hung up sheet restores the terminal, and never outlives it."""

import asyncio
import contextlib
import os
import signal
import threading
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from advisor.screens.app import Gudgeon

_PATIENCE_S = 2.0
"""Where the terminal itself is gone the screen's own shutdown can hang; answers are saved already."""


def end_on_signals(app: "Gudgeon") -> None:
    """Leave on SIGTERM and SIGHUP, where the system has them."""
    loop = asyncio.get_running_loop()
    for name in ("SIGTERM", "SIGHUP"):
        number = getattr(signal, name, None)
        if number is not None:
            # Windows has no such handlers, and only the main thread may set them: there the system's own end serves.
            with contextlib.suppress(NotImplementedError, RuntimeError, ValueError):
                loop.add_signal_handler(number, _end, app, int(number))


def _end(app: "Gudgeon", number: int) -> None:
    last = threading.Timer(_PATIENCE_S, _give_up, (app, 128 + number))
    last.daemon = True
    last.start()
    app.exit(return_code=128 + number)


def _give_up(app: "Gudgeon", code: int) -> None:
    if app.session is not None:
        app.session.close()
    os._exit(code)
