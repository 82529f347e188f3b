"""Undo and redo without limit: a list of named, immutable parts."""

from __future__ import annotations

from screenapp.model.part import Part


class History:
    """The part as it now is, with the steps that led to it and those undone.

    Example:
        >>> h = History(Part(title="a"))
        >>> h.push("rename", Part(title="b"))
        >>> h.undo(), h.part.title, h.can_redo
        ('rename', 'a', True)
    """

    def __init__(self, part: Part) -> None:
        self._steps: list[tuple[str, Part]] = [("", part)]
        self._now = 0

    @property
    def part(self) -> Part:
        """The present part."""
        return self._steps[self._now][1]

    @property
    def can_undo(self) -> bool:
        """Whether there is a step to take back."""
        return self._now > 0

    @property
    def can_redo(self) -> bool:
        """Whether there is an undone step to take again."""
        return self._now + 1 < len(self._steps)

    @property
    def undo_name(self) -> str:
        """Name of the step that undo would take back; empty if none."""
        return self._steps[self._now][0]

    @property
    def redo_name(self) -> str:
        """Name of the step that redo would take again; empty if none."""
        return self._steps[self._now + 1][0] if self.can_redo else ""

    def push(self, name: str, part: Part) -> None:
        """Take a step; undone steps are forgotten."""
        del self._steps[self._now + 1 :]
        self._steps.append((name, part))
        self._now += 1

    def undo(self) -> str:
        """Take the last step back and return its name."""
        if not self.can_undo:
            raise IndexError("nothing to undo")
        self._now -= 1
        return self._steps[self._now + 1][0]

    def redo(self) -> str:
        """Take the last undone step again and return its name."""
        if not self.can_redo:
            raise IndexError("nothing to redo")
        self._now += 1
        return self._steps[self._now][0]
