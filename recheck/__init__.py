"""recheck tells whether the numbers printed in a manuscript can be true, without its raw data."""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

from recheck.version import __version__

if TYPE_CHECKING:
    from recheck.auditing import audit, audit_text
    from recheck.errors import RecheckError
    from recheck.model import Audit

__all__ = ["Audit", "RecheckError", "__version__", "audit", "audit_text"]


_HOMES = {
    "Audit": "recheck.model",
    "RecheckError": "recheck.errors",
    "audit": "recheck.auditing",
    "audit_text": "recheck.auditing",
}


def __dir__() -> list[str]:
    return sorted({*globals(), *__all__})


def __getattr__(name: str) -> Any:
    """Import a public name when it is first asked for: numpy and scipy cost a third of a second."""
    if name not in _HOMES:
        raise AttributeError(f"module 'recheck' has no attribute {name!r}")
    return getattr(import_module(_HOMES[name]), name)
