"""The XML of an annotated ECG, read in one pass; only elements that are used are kept.

Parsed by defusedxml: a document type, entities and anything outside the file are refused. Sizes
are bounded while reading, because a small file can ask for much: many elements, one very long
tag, or deep nesting.
"""

from __future__ import annotations

from collections.abc import Collection, Iterator
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from core.recordings.aecg.digits import Digits
from core.recordings.aecg.errors import AecgError
from core.recordings.aecg.recognition import ROOT
from core.recordings.shown import shown
from core.recordings.size_limit import MOST_VALUES

# 42 minutes of twelve leads at 500 Hz (`MOST_VALUES`), six characters a sample.
LARGEST_BYTES = 100_000_000
# Beats of ten minutes, marked in each of twelve leads, are some 300,000 elements.
MOST_ELEMENTS = 500_000
# Of those kept, eight go with a sequence: a thousand sets of twelve leads.
MOST_KEPT = 100_000
# The standard nests its samples 8 deep and its annotations some 20.
DEEPEST = 100
# A tag or a comment as one piece; the longest of the standard's are a few hundred bytes.
LONGEST_TAG_BYTES = 1_000_000
_BLOCK_BYTES = 1 << 18
_LONGEST_TEXT = 200
_SHORTEN_AND_STRIP = "Export a shorter stretch of it, without annotations."
_SHORTEN = "Export a shorter stretch of it."

# Annotations, devices, sites and the trial are left out with all that is inside them.
_KEPT = frozenset(
    """
    AnnotatedECG componentOf timepointEvent subjectAssignment subject trialSubject
    subjectDemographicPerson id name given family prefix suffix administrativeGenderCode birthTime
    effectiveTime low high controlVariable code value component series derivation derivedSeries
    sequenceSet sequence head increment origin scale digits
    """.split()  # noqa: SIM905, a list of words is read as such
)
_KEPT_ATTRIBUTES = frozenset(
    ["code", "value", "unit", "root", "extension", "denominator", "period"]
)
_WITH_TEXT = frozenset(["name", "given", "family", "prefix", "suffix"])


@dataclass(slots=True, eq=False)
class Node:
    """One element: its name without a prefix, its attributes, and its elements in order."""

    name: str
    attributes: dict[str, str]
    children: list[Node] = field(default_factory=list)
    text: str = ""
    digits: Digits | None = None

    def first(self, *path: str) -> Node | None:
        """The first element at the end of a path of names."""
        node: Node | None = self
        for name in path:
            if node is None:
                break
            node = next((child for child in node.children if child.name == name), None)
        return node

    def all(self, name: str) -> list[Node]:
        """The elements of a name, one level down."""
        return [child for child in self.children if child.name == name]

    def within(self, name: str, *, not_in: Collection[str] = ()) -> Iterator[Node]:
        """Elements of a name at any level below, but not in or below the elements *not_in*."""
        waiting = self.children[::-1]
        while waiting:
            node = waiting.pop()
            if node.name in not_in:
                continue
            if node.name == name:
                yield node
            waiting.extend(reversed(node.children))

    def attribute(self, name: str, *path: str) -> str | None:
        """An attribute of this element, or of the one at the end of a path."""
        node = self.first(*path)
        return None if node is None else node.attributes.get(name)

    @property
    def code(self) -> str:
        """What the element's ``code`` says; empty where it has none."""
        return (self.attribute("code", "code") or "").strip()


def read_document(path: Path) -> Node:
    """The root of an annotated ECG.

    Raises
    ------
    AecgError
        If the file is no well-formed XML, declares a document type, has another root, or is
        larger or deeper than annotated ECGs are.
    OSError
        If the file cannot be opened.
    """
    from defusedxml import DefusedXmlException
    from defusedxml.ElementTree import XMLParser

    builder = _Builder()
    parser: Any = XMLParser(target=builder, forbid_dtd=True)
    try:
        with path.open("rb") as file:
            _feed(parser, file)
        return builder.root_of_whole(parser)
    except AecgError:
        raise
    except DefusedXmlException as error:
        raise AecgError(
            "declares a document type or entities, which are not read because they can fill the "
            "memory or reach for other files",
            "Export it without them.",
        ) from error
    except SyntaxError as error:
        line, _ = getattr(error, "position", (0, 0))
        raise AecgError(f"is damaged: its XML breaks off or is malformed in line {line}") from error
    except (LookupError, ValueError) as error:  # no such codec, or one of several bytes
        raise AecgError("is in a text encoding that cannot be read", "Save it in UTF-8.") from error


def _feed(parser: Any, file: Any) -> None:
    n_fed = 0
    while block := file.read(_BLOCK_BYTES):
        parser.feed(block)
        n_fed += len(block)
        if n_fed > LARGEST_BYTES:
            raise AecgError(f"is larger than {LARGEST_BYTES // 10**6} MB", _SHORTEN)
        # Where the parser stands is the beginning of what it could not finish.
        if n_fed - max(parser.parser.CurrentByteIndex, 0) > LONGEST_TAG_BYTES + _BLOCK_BYTES:
            raise AecgError(f"holds a tag or a comment of more than {LONGEST_TAG_BYTES} bytes")


class _Builder:
    """What the parser reports to."""

    def __init__(self) -> None:
        self._open: list[Node] = []
        self._root: Node | None = None
        self._namespace = ""
        self._n_skipped_open = 0
        self._n_elements = 0
        self._n_kept = 0
        self._n_values = 0

    def root_of_whole(self, parser: Any) -> Node:
        parser.close()
        assert self._root is not None  # the parser refuses a file without elements
        return self._root

    def start(self, tag: str, attributes: dict[str, str]) -> None:
        self._n_elements += 1
        if self._n_elements > MOST_ELEMENTS:
            raise AecgError(f"has more than {MOST_ELEMENTS} elements", _SHORTEN_AND_STRIP)
        if len(self._open) + self._n_skipped_open >= DEEPEST:
            raise AecgError(f"nests its elements more than {DEEPEST} deep")
        namespace, _, name = tag.rpartition("}")
        if self._root is None:
            if name != ROOT:
                raise AecgError(
                    f"begins with the element '{shown(name)}' and not with '{ROOT}'",
                    "Choose an HL7 annotated ECG.",
                )
            self._namespace = namespace
        if self._n_skipped_open or name not in _KEPT or namespace not in ("", self._namespace):
            self._n_skipped_open += 1
            return
        self._n_kept += 1
        if self._n_kept > MOST_KEPT:
            raise AecgError(f"has more than {MOST_KEPT} elements beside annotations", _SHORTEN)
        node = Node(
            name, {key: value for key, value in attributes.items() if key in _KEPT_ATTRIBUTES}
        )
        if name == "digits":
            node.digits = Digits()
        if self._root is None:
            self._root = node
        else:
            self._open[-1].children.append(node)
        self._open.append(node)

    def data(self, text: str) -> None:
        if self._n_skipped_open or not self._open:
            return
        node = self._open[-1]
        if node.digits is not None:
            node.digits.add(text)
            self._refuse_too_many(node.digits.n_values)
        elif node.name in _WITH_TEXT and len(node.text) < _LONGEST_TEXT:
            node.text += text[:_LONGEST_TEXT]

    def end(self, tag: str) -> None:
        if self._n_skipped_open:
            self._n_skipped_open -= 1
            return
        node = self._open.pop()
        if node.digits is not None:
            node.digits.end()
            self._refuse_too_many(node.digits.n_values)
            self._n_values += node.digits.n_values

    def _refuse_too_many(self, n_here: int) -> None:
        if self._n_values + n_here > MOST_VALUES:
            raise AecgError(f"holds more than {MOST_VALUES // 10**6} million samples", _SHORTEN)
