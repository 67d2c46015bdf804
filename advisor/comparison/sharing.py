"""Two pieces of work at the same time: the second in a fork of this process, which knows all that this one knows."""

import gc
import os
import sys
import warnings
from collections.abc import Callable
from multiprocessing import get_context
from multiprocessing.connection import Connection
from typing import TypeVar

One = TypeVar("One")
Other = TypeVar("Other")


def beside(first: Callable[[], One], second: Callable[[], Other]) -> tuple[One, Other]:
    """What both come to; one after the other where a process cannot be forked, or none is free.

    The second may not use the rules engine as it stands here: that belongs to the process that made it.
    """
    if sys.platform != "linux" or (os.cpu_count() or 1) < 2:
        return first(), second()
    # What is here stays: the collector need not walk it again in either process, nor copy it by doing so.
    gc.freeze()
    context = get_context("fork")
    receiving, sending = context.Pipe(duplex=False)
    helper = context.Process(target=_send, args=(receiving, sending, second), daemon=True)
    with warnings.catch_warnings():
        # Threads of others are not in the way: the helper runs nothing but the work, and ends.
        warnings.simplefilter("ignore", DeprecationWarning)
        helper.start()
    sending.close()
    try:
        one = first()
        try:
            return one, receiving.recv()
        except EOFError:
            # The helper came upon something: it comes up here as well, where it is told.
            return one, second()
    finally:
        receiving.close()
        helper.terminate()
        helper.join()


def _send(receiving: Connection, sending: Connection, work: Callable[[], object]) -> None:
    # As long as this end were open here too, a result that nobody takes any more would never be given up.
    receiving.close()
    try:
        sending.send(work())
    except (Exception, KeyboardInterrupt):
        return
