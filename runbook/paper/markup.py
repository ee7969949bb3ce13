"""A page as a tree of elements, so that text from a file is never markup: it is escaped when the tree is written.

Refuses to pass on ready-made markup; the style sheet is the only text that is not escaped, and it is ours.
"""

from __future__ import annotations

from xml.etree.ElementTree import Element, SubElement, tostring

Child = Element | str | None
"""None is left out, so that a page may say `x if x else None`."""


def tag(name: str, *children: Child, **attributes: str | float) -> Element:
    """An element; an attribute's trailing underscore falls away and inner ones become hyphens."""
    element = Element(name, {k.rstrip("_").replace("_", "-"): _text(v) for k, v in attributes.items()})
    last: Element | None = None
    for child in children:
        if child is None:
            continue
        if isinstance(child, str):
            if last is None:
                element.text = (element.text or "") + child
            else:
                last.tail = (last.tail or "") + child
        else:
            element.append(child)
            last = child
    return element


def table(head: tuple[str, ...], rows: list[tuple[Child, ...]], class_: str) -> Element:
    """A table with one line of headings; none where no heading is given."""
    return tag(
        "table",
        tag("thead", tag("tr", *(tag("th", h, scope="col") for h in head))) if head else None,
        tag("tbody", *(tag("tr", *(tag("td", cell) for cell in row)) for row in rows)),
        class_=class_,
    )


def document(title: str, style: str, *bodies: Element) -> str:
    """The whole page as text."""
    head = tag("head")
    SubElement(head, "meta", {"charset": "utf-8"})
    SubElement(head, "meta", {"name": "viewport", "content": "width=device-width"})
    head.append(tag("title", title))
    head.append(tag("style", style))
    html = tag("html", head, tag("body", *bodies), lang="en")
    return "<!doctype html>\n" + tostring(html, encoding="unicode", method="html") + "\n"


def _text(value: str | float) -> str:
    return value if isinstance(value, str) else f"{value:.3f}".rstrip("0").rstrip(".")
