"""The XML parts of a workbook, walked as a stream of starts, texts and ends; a document type is refused."""

from collections.abc import Callable, Iterable
from xml.parsers import expat

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.parts import DAMAGED

Attributes = dict[str, str]
_DEEPEST = 200


class Walker:
    """What meets the elements of one part; names come without their prefix.

    Subclasses take what they need of ``start``, ``end`` and ``text``.
    """

    def start(self, name: str, attributes: Attributes) -> None:
        """An element begins."""

    def end(self, name: str) -> None:
        """An element ends."""

    def text(self, text: str) -> None:
        """Text inside the element that began last, possibly in several pieces."""


def walk(chunks: Iterable[bytes], walker: Walker) -> None:
    """Lead a walker through one XML part.

    A document type can make a small part grow without end (entities inside entities) or reach for other files; no
    spreadsheet writes one, so it is refused. Raises IntakeComplaint for that, and for XML that is not well-formed.
    """
    parser = expat.ParserCreate()
    parser.buffer_text = True
    parser.StartDoctypeDeclHandler = _refuse_document_type
    parser.StartElementHandler, parser.EndElementHandler = _handlers(walker)
    parser.CharacterDataHandler = walker.text
    try:
        for chunk in chunks:
            parser.Parse(chunk, False)
        parser.Parse(b"", True)
    except (expat.ExpatError, UnicodeError, LookupError) as error:
        raise IntakeComplaint(DAMAGED) from error


def _handlers(walker: Walker) -> tuple[Callable[[str, Attributes], None], Callable[[str], None]]:
    plain: dict[str, str] = {}
    depth = 0

    def start(name: str, attributes: Attributes) -> None:
        nonlocal depth
        depth += 1
        if depth > _DEEPEST or len(plain) > 10_000:
            raise IntakeComplaint(DAMAGED)
        for key in attributes:
            if ":" in key:
                attributes = _without_prefixes(attributes)
                break
        local = plain.get(name)
        if local is None:
            local = plain[name] = name.rpartition(":")[2]
        walker.start(local, attributes)

    def end(name: str) -> None:
        nonlocal depth
        depth -= 1
        walker.end(plain[name])

    return start, end


def _without_prefixes(attributes: Attributes) -> Attributes:
    """Attributes by their local name; of two with the same one the first counts."""
    return {key.rpartition(":")[2]: value for key, value in reversed(attributes.items())}


def _refuse_document_type(*_: object) -> None:
    raise IntakeComplaint(
        "The workbook holds a document type declaration, which no spreadsheet writes and which can overload the "
        "computer. It is not opened, to be safe. Save the sheet anew as .xlsx or .csv."
    )
