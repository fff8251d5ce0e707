"""The whole page: answers first, then traps, curves, source and provenance, in one file without links outside."""

from __future__ import annotations

from dataclasses import dataclass
from importlib.resources import files
from pathlib import PurePath
from typing import TYPE_CHECKING

from eoscore.show.report.answers import answer_sections, hardware_cautions
from eoscore.show.report.curves import curve_pictures
from eoscore.show.report.markup import Markup, element, together
from eoscore.show.report.picture import Gallery
from eoscore.show.report.provenance import provenance
from eoscore.show.report.source import source_listing
from eoscore.show.report.subject import subjects
from eoscore.show.report.traps import trap_pictures

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Sequence

    from eoscore.answer.lab import Lab
    from eoscore.answer.record import Report
    from eoscore.show.report.subject import Subject

__all__ = ["Input", "report_page"]


@dataclass(frozen=True)
class Input:
    """What a page is made of: the text with its name, the settings, the accuracy and the draws of the run."""

    name: str
    content: bytes
    settings: Sequence[str] = ()
    accuracy: float = 1e-6
    sample: int = 0

    @property
    def file(self) -> str:
        """The name without its folder, which tells whoever gets the page about a disk they do not have."""
        return PurePath(self.name).name

    @property
    def text(self) -> str:
        """The characters of the text."""
        return self.content.decode("utf-8-sig", "replace")

    @property
    def title(self) -> str:
        """The comment that opens the text, else the name of the file."""
        first = self.text.split("\n", 1)[0].strip()
        return first.lstrip("# ") if first.startswith("#") and first.strip("# ") else self.file


def report_page(source: Input, lab: Lab, report: Report) -> str:
    """The page as HTML; it holds its style and its pictures, and asks the network for nothing."""
    gallery = Gallery()
    about = list(subjects(lab, report.answers))
    sections = [
        ("answers", "Answers", together(*answer_sections(report, gallery))),
        ("traps", "The trap and the cloud", _pictures(about, gallery, trap_pictures)),
        ("curves", "Where on the curve", _pictures(about, gallery, curve_pictures)),
        ("source", "Source", source_listing(source.text, _lines(report))),
        ("provenance", "How to make this page again", _provenance(source)),
    ]
    shown = [(name, title, body) for name, title, body in sections if body]
    main = element("main", hardware_cautions(report), *(_section(*each) for each in shown), id="main")
    top = element("header", element("h1", source.title), element("p", source.file), _contents(shown))
    skip = element("a", "Skip to the answers", href="#answers", class_="skip")
    body = element("body", skip, top, main)
    return f'<!DOCTYPE html>\n<html lang="en">{_head(source)}{body}</html>\n'


def _head(source: Input) -> Markup:
    style = files("eoscore.show.report").joinpath("page.css").read_text(encoding="utf-8")
    return element(
        "head",
        Markup('<meta charset="utf-8">'),
        Markup('<meta name="viewport" content="width=device-width, initial-scale=1">'),
        Markup('<meta name="color-scheme" content="light dark">'),
        Markup('<link rel="icon" href="data:,">'),
        element("title", source.title),
        element("style", Markup(style)),
    )


def _contents(sections: list[tuple[str, str, Markup]]) -> Markup:
    links = [element("li", element("a", title, href=f"#{name}")) for name, title, _ in sections]
    return element("nav", element("ul", *links), aria_label="Contents")


def _section(name: str, title: str, body: Markup) -> Markup:
    return element("section", element("h2", title, id=name), body, aria_labelledby=name)


def _pictures(
    about: Sequence[Subject],
    gallery: Gallery,
    pictures: Callable[[Subject, Gallery], Iterator[Markup]],
) -> Markup:
    """The pictures of each subject side by side under its name; words where nothing is held."""
    parts = []
    for subject in about:
        drawn = list(pictures(subject, gallery))
        if drawn:
            parts += [element("h3", subject.name), element("div", *drawn, class_="pictures")]
        elif subject.why:
            parts += [element("h3", subject.name), element("p", subject.why)]
    return together(*parts)


def _lines(report: Report) -> dict[int, int]:
    """Line numbers to the numbers of the answers asked there."""
    return {answer.line: number for number, answer in enumerate(report.answers, 1)}


def _provenance(source: Input) -> Markup:
    options = [] if source.accuracy == 1e-6 else ["--accuracy", f"{source.accuracy:g}"]
    options += ["--sample", str(source.sample)] if source.sample else []
    return provenance(source.file, source.content, source.settings, options)
