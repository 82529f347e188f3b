"""8 Verdict: each limit in each case, the reasons, the cautions, and who decides."""

from __future__ import annotations

from screenapp.model.errors import causes_of
from screenapp.model.findings import Findings, LimitFindings
from screenapp.window.sheet.field import capital
from screenapp.window.sheet.limits_table import LimitsTable
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import Piece, Words
from screenapp.window.sheet.reasons import head_says
from screenapp.window.sheet.rows import RowOf

ALWAYS = "A screening, not an approval: local codes and a licensed engineer decide."


class VerdictParagraph(Paragraph):
    """The verdicts."""

    number = 8
    title = "Verdict"
    fields = ()

    def build(self) -> None:
        """A table, reasons, cautions and the closing sentence."""
        self.table = LimitsTable(self.document, self)
        self.body.addWidget(self.table)
        self.reasons = self.rows(0)
        self.cautions = self.rows(0)
        self.always = self.sentence()
        self.column.addWidget(self.always)  # after all else
        self.always.set(ALWAYS)

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the verdicts."""
        findings = self.document.findings
        self.table.show_limits(findings.limits if findings else ())
        texts = _reasons(findings) if findings else []
        quiet = self.outdated()
        self.reasons.set(
            [RowOf(f"reason {i}", (), (Words(t, quiet=quiet),)) for i, t in enumerate(texts)]
        )
        cautions = self._cautions(findings) if findings else []
        self.cautions.set(
            [RowOf(f"caution {i}", (), (Words(t, colour="doubt"),)) for i, t in enumerate(cautions)]
        )
        if findings is None:
            return ("The part has not been screened.",)
        return ()

    def _cautions(self, findings: Findings) -> list[str]:
        """The cautions, those that the paragraphs above tell counted alone."""
        told = set(causes_of(self.document.faults))
        new = [f"{capital(c)}." for c in findings.cautions if c not in told]
        above = len(findings.cautions) - len(new)
        if above:
            things = "One caution stands" if above == 1 else f"{above} cautions stand"
            new.append(f"{things} in the paragraphs above.")
        return new

    def outdated(self) -> bool:
        """The verdict belongs to an older part."""
        return self.document.findings is not None and not self.document.current


def _reasons(findings: Findings) -> list[str]:
    """The reasons that the head of the sheet has no room for."""
    said = [f"{capital(r)}." for r in findings.reasons if not head_says(findings, r)]
    for limit in findings.limits:
        if (
            limit.reason
            and not head_says(findings, limit.reason)
            and not any(_same(limit, text) for text in said)
        ):
            said.append(f"{capital(limit.reason)}.")
    return said


def _same(limit: LimitFindings, text: str) -> bool:
    return capital(limit.reason) in text
