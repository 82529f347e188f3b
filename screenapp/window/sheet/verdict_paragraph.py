"""8 Verdict: each limit in each case, the reasons, the cautions, and who decides."""

from __future__ import annotations

from screenapp.model.edit_settings import set_job_details
from screenapp.model.errors import causes_of
from screenapp.model.findings import Findings, LimitFindings
from screenapp.window.document import Document
from screenapp.window.sheet.field import capital
from screenapp.window.sheet.limits_table import LimitsTable
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import Piece, Value, Words
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
        self.details = self.sentence()
        self.column.addWidget(self.details)
        self.always = self.sentence()
        self.column.addWidget(self.always)  # after all else
        self.always.set(ALWAYS)

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the verdicts."""
        self.details.set(*_details(self.document))
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


NOBODY, NOTHING = "nobody yet", "not given"


def _details(document: Document) -> tuple[Piece | str, ...]:
    """Who did it, who checked it, and what it belongs to: printed in the record."""

    def text(field: str, name: str, none: str) -> Value:
        given = getattr(document.part.record, field)
        return Value(
            field,
            given or none,
            name,
            lambda typed: document.apply(
                name.lower(), set_job_details(document.part, **{field: typed})
            ),
            hint="Printed in the record; leave it empty for none",
            typed=given,
        )

    return (
        *("Screened by ", text("done_by", "Who screened it", NOBODY)),
        *(", checked by ", text("checked_by", "Who checked it", NOBODY)),
        *("; job ", text("job", "Number of the job", NOTHING)),
        *(", drawing ", text("drawing", "Number of the drawing", NOTHING)),
        *(", revision ", text("revision", "Revision of the drawing", NOTHING), "."),
    )


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
