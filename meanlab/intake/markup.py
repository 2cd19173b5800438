"""The XML parts of a workbook, walked as a stream of starts, texts and ends; a document type is refused."""

from collections.abc import Callable, Iterable
from xml.parsers import expat

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.parts import DAMAGED

Attributes = dict[str, str]
_MOST_NAMES = 1_000


class Walker:
    """What meets the elements of one part; subclasses take what they need of ``start``, ``end`` and ``text``.

    Where the root element has a prefix, all names come without theirs; where it has none, only foreign names have one.
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
    parser.CharacterDataHandler = walker.text

    def begin(name: str, attributes: Attributes) -> None:
        start, end = _without_prefix(walker) if ":" in name else (walker.start, walker.end)
        parser.StartElementHandler, parser.EndElementHandler = start, end
        start(name, attributes)

    parser.StartElementHandler = begin
    try:
        for chunk in chunks:
            parser.Parse(chunk, False)
        parser.Parse(b"", True)
    except IntakeComplaint:
        raise
    except (expat.ExpatError, ValueError, LookupError) as error:
        raise IntakeComplaint(DAMAGED) from error


def _without_prefix(
    walker: Walker,
) -> tuple[Callable[[str, Attributes], None], Callable[[str], None]]:
    """Hand elements to the walker without their prefix."""
    plain: dict[str, str] = {}

    def start(name: str, attributes: Attributes) -> None:
        local = plain.get(name)
        if local is None:
            if len(plain) > _MOST_NAMES:
                raise IntakeComplaint(DAMAGED)
            local = plain[name] = name.rpartition(":")[2]
        walker.start(local, _without_prefixes(attributes))

    def end(name: str) -> None:
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
