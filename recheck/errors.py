"""Everything that recheck says when it cannot go on, by what the user can do next."""

from __future__ import annotations


class RecheckError(Exception):
    """The root of all errors that recheck raises on purpose."""


class UnreadableDocument(RecheckError):
    """A document that cannot be read; the message is one sentence: what, where, what to do."""

    def __init__(self, name: str, reason: str, advice: str) -> None:
        self.name = name
        self.reason = reason
        self.advice = advice
        super().__init__(name, reason, advice)

    def __str__(self) -> str:
        return f"{self.name}: {self.reason}; {self.advice}."


class UnknownCheck(RecheckError):
    """A check was asked for by a name that the registry does not have."""
