"""Errors that speak to the person: which reading, what was given, what is allowed, what to do."""


class BadReading(ValueError):
    """A reading that cannot be used."""

    def __init__(self, field: str, given: str, allowed: str, action: str) -> None:
        super().__init__(f"{field}: {given!r}. {allowed} {action}")
        self.field, self.given, self.allowed, self.action = field, given, allowed, action

    def as_dict(self) -> dict[str, str]:
        """The four parts by name."""
        return {"field": self.field, "given": self.given, "allowed": self.allowed, "action": self.action}
