"""The record's page as a tree, so that another form of it (the PDF) is made from the same words.

Nothing is worded twice: whatever the page says, the PDF says, in the same order.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from html.parser import HTMLParser
from xml.etree.ElementTree import Element, TreeBuilder

_VOID = {"meta", "br", "img"}
_RULE = re.compile(r"([^{}]+)\{([^{}]*)\}")
_COMPOUND = re.compile(r"^([a-z]*)((?:\.[\w-]+)*)$")


class _Reader(HTMLParser):
    """Builds a tree of a page whose tags all close."""

    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.builder = TreeBuilder()

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.builder.start(tag, {name: value or "" for name, value in attrs})
        if tag in _VOID:
            self.builder.end(tag)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.builder.start(tag, {name: value or "" for name, value in attrs})
        self.builder.end(tag)

    def handle_endtag(self, tag: str) -> None:
        self.builder.end(tag)

    def handle_data(self, data: str) -> None:
        self.builder.data(data)


def page_tree(page: str) -> Element:
    """The page's tree; names of tags and attributes are in small letters."""
    reader = _Reader()
    reader.feed(page)
    reader.close()
    return reader.builder.close()


def part_of(tree: Element, tag: str) -> Element:
    """The first element of that name.

    Raises:
        ValueError: the page has none.
    """
    found = tree.find(f".//{tag}")
    if found is None:
        raise ValueError(f"the page has no <{tag}>")
    return found


def classes_of(element: Element) -> tuple[str, ...]:
    """Names in its class attribute."""
    return tuple(element.get("class", "").split())


# --- styles of drawings ---------------------------------------------------------------------


@dataclass(frozen=True)
class _Rule:
    """Declarations for what a selector finds; `weight` is its specificity."""

    compounds: tuple[tuple[str, frozenset[str]], ...]
    weight: tuple[int, int]
    declarations: tuple[tuple[str, str], ...]


class DrawingStyles:
    """What the page's style sheet says of the drawings in it."""

    def __init__(self, sheet: str) -> None:
        self._rules = sorted(_rules(sheet), key=lambda rule: rule.weight)  # keeps the order

    def of(self, element: Element, drawing: Element) -> dict[str, str]:
        """Properties of an element that stands directly in a drawing; those of a rule that says
        more of the element win, then those of the later rule."""
        found: dict[str, str] = {}
        for rule in self._rules:
            *above, last = rule.compounds
            if _fits(element, *last) and all(_fits(drawing, *one) for one in above):
                found.update(rule.declarations)
        return found


def _rules(sheet: str) -> Iterator[_Rule]:
    for selectors, body in _RULE.findall(sheet):
        pairs = [one.split(":", 1) for one in body.split(";") if ":" in one]
        declarations = tuple((name.strip(), value.strip()) for name, value in pairs)
        for selector in selectors.split(","):
            words = selector.split()
            if not words or not words[0].startswith("svg"):
                continue
            compounds = []
            for word in words:
                match = _COMPOUND.match(word)
                if match is None:
                    raise ValueError(f"a style for drawings that is not understood: {selector}")
                names = frozenset(match.group(2).split(".")) - {""}
                compounds.append((match.group(1), names))
            weight = (
                sum(len(names) for _, names in compounds),
                sum(1 for tag, _ in compounds if tag),
            )
            yield _Rule(tuple(compounds), weight, declarations)


def _fits(element: Element, tag: str, names: frozenset[str]) -> bool:
    return (not tag or element.tag == tag) and names <= set(classes_of(element))
