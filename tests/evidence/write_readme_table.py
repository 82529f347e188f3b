"""Put the evidence table between its markers in README.md.

Run from the repository: `python -m tests.evidence.write_readme_table`, after
`SCREENAPP_WRITE_EVIDENCE=all python -m pytest tests/evidence`.
"""

from __future__ import annotations

import sys
from pathlib import Path

from tests.evidence.table import markdown, read

README = Path(__file__).parents[2] / "README.md"


def with_table(text: str, table: str, mark: str = "evidence") -> str:
    """The text with the table between its markers, `<!-- mark -->` and `<!-- /mark -->`.

    Raises:
        ValueError: the markers are missing or the wrong way round.
    """
    begin, end = f"<!-- {mark} -->", f"<!-- /{mark} -->"
    first, last = text.find(begin), text.find(end)
    if first < 0 or last < first:
        raise ValueError(f"no {begin} ... {end} in the text")
    return f"{text[: first + len(begin)]}\n{table}\n{text[last:]}"


def main() -> int:
    """Rewrite README.md; 1 if that cannot be done."""
    rows = read()
    if not rows:
        print("no results: run the evidence tests with SCREENAPP_WRITE_EVIDENCE=all first")
        return 1
    try:
        text = with_table(README.read_text(encoding="utf-8"), markdown(rows))
    except (OSError, ValueError) as error:
        print(error)
        return 1
    README.write_text(text, encoding="utf-8")
    return 0


if __name__ == "__main__":
    sys.exit(main())
