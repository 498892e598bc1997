"""What a long run says of itself while it works: anyone may tell, and who started the run may listen. Rank 0.

Telling costs next to nothing where nobody listens; nothing a run finds depends on it.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from contextlib import contextmanager
from contextvars import ContextVar

Listener = Callable[[str], None]

_listener: ContextVar[Listener | None] = ContextVar("takeoff_progress", default=None)


def tell(what: str) -> None:
    """Say what is being done now, in a few words: ``12 000 rows read``, ``placing on vehicles: 4 at least, 5 at best``."""
    listener = _listener.get()
    if listener is not None:
        listener(what)


@contextmanager
def listening(listener: Listener) -> Iterator[None]:
    """Have what is told in this context go to `listener`."""
    token = _listener.set(listener)
    try:
        yield
    finally:
        _listener.reset(token)
