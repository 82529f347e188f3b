"""What runs along every sheet of the record's PDF: title, part hash, date, number."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime

from reportlab.lib.pagesizes import A4
from reportlab.lib.units import mm
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.pdfgen.canvas import Canvas

from screenapp.report.pdf_type import INK, LINE, PLAIN, QUIET

SIZE = 7.5  # of its letters [pt]


@dataclass(frozen=True)
class Running:
    """Title and hash at the head, program and date at the foot; `margin` in points."""

    title: str
    part: str
    made: str
    margin: float


class Numbered(Canvas):  # type: ignore[misc]
    """Holds every sheet back until their number is known."""

    def __init__(
        self, running: Running, when: datetime, *arguments: object, **options: object
    ) -> None:
        super().__init__(*arguments, **options)
        self._running = running
        self._sheets: list[dict[str, object]] = []
        stamp = pdf_date(when)
        self.setDateFormatter(lambda *_: stamp)

    def showPage(self) -> None:
        """Keep a finished sheet."""
        self._sheets.append(dict(self.__dict__))
        self._startPage()

    def save(self) -> None:
        """Write the sheets, each with its number and how many there are."""
        sheets = list(self._sheets)
        for number, sheet in enumerate(sheets, 1):
            self.__dict__.update(sheet)
            self._run_along(number, len(sheets))
            super().showPage()
        super().save()

    def _run_along(self, number: int, count: int) -> None:
        margin, right = self._running.margin, A4[0] - self._running.margin
        head, foot = A4[1] - 15.0 * mm, 12.0 * mm
        self.setFont(PLAIN, SIZE)
        self.setFillColor(INK)
        hash_width = stringWidth(self._running.part, PLAIN, SIZE)
        self.drawString(margin, head, fitted(self._running.title, right - margin - hash_width - 12))
        self.setFillColor(QUIET)
        self.drawRightString(right, head, self._running.part)
        self.drawString(margin, foot, self._running.made)
        self.drawCentredString(0.5 * A4[0], foot, "a screening, not an approval")
        self.drawRightString(right, foot, f"page {number} of {count}")
        self.setStrokeColor(LINE)
        self.setLineWidth(0.5)
        self.line(margin, head - 5.0, right, head - 5.0)
        self.line(margin, foot + 10.0, right, foot + 10.0)


def fitted(words: str, room: float) -> str:
    """As many of the words as fit [pt], with an ellipsis where some are left out."""
    if stringWidth(words, PLAIN, SIZE) <= room:
        return words
    kept = words
    while kept and stringWidth(kept + "…", PLAIN, SIZE) > room:
        kept = kept[:-1]
    return kept.rstrip() + "…"


def pdf_date(when: datetime) -> str:
    """A date as PDF writes it (ISO 32000-1, 7.9.4)."""
    zone = when.strftime("%z")
    return when.strftime("D:%Y%m%d%H%M%S") + (f"{zone[:3]}'{zone[3:5]}'" if zone else "")
