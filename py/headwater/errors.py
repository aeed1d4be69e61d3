"""Errors that speak to the person: which reading, what was given, what is allowed, what to do."""

from collections.abc import Mapping

_LONGEST = 60  # characters of a reading repeated in an error
_HUGE = 10**18


class BadReading(ValueError):
    """A reading that cannot be used."""

    def __init__(self, field: str, given: str, allowed: str, action: str) -> None:
        super().__init__(f"{field}: {given!r}. {allowed} {action}")
        self.field, self.given, self.allowed, self.action = field, given, allowed, action

    def as_dict(self) -> dict[str, str]:
        """The four parts by name."""
        return {"field": self.field, "given": self.given, "allowed": self.allowed, "action": self.action}


def quote(given: object) -> str:
    """What was given, short and printable, whatever it is; nothing for a reading that is missing."""
    if given is None:
        return ""
    if isinstance(given, bool):
        return "true" if given else "false"
    if isinstance(given, int):
        return str(given) if -_HUGE < given < _HUGE else "a huge number"
    if isinstance(given, float):
        return repr(given)
    if not isinstance(given, str):
        return "an object" if isinstance(given, Mapping) else "a list"
    text = "".join(c if c.isprintable() else " " if c.isspace() else "?" for c in given[: _LONGEST + 1])
    return text if len(text) <= _LONGEST else text[: _LONGEST - 1] + "…"
