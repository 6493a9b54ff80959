"""XML from strangers: elements only, no document type, no entities, nothing fetched.

The parser of Python's library is told to stop at the first word of a document type, so that
entities can be neither declared nor expanded; size, depth and number of elements are bounded.
"""

from dataclasses import dataclass, field
from typing import Any, NoReturn
from xml.parsers import expat

from skytiles.errors import AlertError

MAX_XML_BYTES = 1_000_000
_DEEPEST = 40
_MOST_ELEMENTS = 20_000


@dataclass
class XmlElement:
    """An element: its namespace apart from its name, attributes, children, its own text."""

    namespace: str
    name: str
    attributes: dict[str, str] = field(default_factory=dict)
    children: list["XmlElement"] = field(default_factory=list)
    text: str = ""

    def all_named(self, name: str) -> list["XmlElement"]:
        """Children of a name."""
        return [child for child in self.children if child.name == name]

    def find(self, *path: str) -> "XmlElement | None":
        """The first element down a path of names, or nothing."""
        element = self
        for name in path:
            found = element.all_named(name)
            if not found:
                return None
            element = found[0]
        return element

    def text_of(self, *path: str) -> str:
        """Text of the first element down a path, blanks made single; empty when it is missing."""
        found = self.find(*path)
        return " ".join(found.text.split()) if found else ""

    def everything(self) -> list["XmlElement"]:
        """This element and all below it, in the sequence of the document."""
        found, waiting = [], [self]
        while waiting:
            element = waiting.pop()
            found.append(element)
            waiting.extend(reversed(element.children))
        return found


class _Builder:
    """Builds the tree while the parser reads, and stops it at the first thing refused."""

    def __init__(self) -> None:
        self.root: XmlElement | None = None
        self.open: list[XmlElement] = []
        self.pieces: list[list[str]] = []
        self.n_elements = 0

    def start(self, name: str, attributes: dict[str, str]) -> None:
        namespace, _, local = name.rpartition(" ")
        self.n_elements += 1
        if self.n_elements > _MOST_ELEMENTS or len(self.open) >= _DEEPEST:
            raise _refused(
                f"it is XML of more than {_MOST_ELEMENTS:,} elements or {_DEEPEST} levels"
            )
        plain = {key.rpartition(" ")[2]: value for key, value in attributes.items()}
        element = XmlElement(namespace, local, plain)
        if self.open:
            self.open[-1].children.append(element)
        else:
            self.root = element
        self.open.append(element)
        self.pieces.append([])

    def end(self, _name: str) -> None:
        self.open.pop().text = "".join(self.pieces.pop())

    def words(self, text: str) -> None:
        self.pieces[-1].append(text)

    def refuse_document_type(self, name: str, *_given: Any) -> NoReturn:
        if name.lower() == "html":
            raise AlertError(
                given="it is a web page",
                allowed="a sky map or MOC in FITS, a VOEvent in XML, or an alert in JSON",
                advice="save the alert file itself, not the page that shows it",
            )
        raise _refused("it is XML with a document type (DOCTYPE), which could declare entities")

    def refuse_entity(self, *_given: Any) -> NoReturn:
        raise _refused("it is XML with entities of its own")

    def refuse_external(self, *_given: Any) -> NoReturn:
        raise _refused("it is XML that names something outside itself")


def read_xml(data: bytes) -> XmlElement:
    """The elements of an XML document.

    Parameters
    ----------
    data : bytes    the whole document

    Returns
    -------
    XmlElement    the root; AlertError for what is too large, damaged or hostile

    Source: XML 1.0; refusals as advised for untrusted XML (no document type at all).
    """
    if len(data) > MAX_XML_BYTES:
        raise AlertError(
            given=f"it is XML of {len(data):,} bytes",
            allowed=f"at most {MAX_XML_BYTES:,} bytes; messages have a few thousand",
            advice="choose the message itself; give a sky map as a file of its own",
        )
    builder = _Builder()
    try:
        _parser(builder).Parse(data, True)
    except (expat.ExpatError, LookupError, ValueError) as error:
        if isinstance(error, AlertError):
            raise
        raise AlertError(
            given=f"it is damaged XML ({error})"[:300],
            allowed="a well-formed VOEvent message",
            advice="fetch the message again; it was probably cut short",
        ) from error
    assert builder.root is not None  # the parser has accepted a whole document
    return builder.root


def _parser(builder: _Builder) -> "expat.XMLParserType":
    parser = expat.ParserCreate(namespace_separator=" ")
    parser.buffer_text = True
    parser.StartElementHandler = builder.start
    parser.EndElementHandler = builder.end
    parser.CharacterDataHandler = builder.words
    parser.StartDoctypeDeclHandler = builder.refuse_document_type
    parser.EntityDeclHandler = builder.refuse_entity
    parser.UnparsedEntityDeclHandler = builder.refuse_entity
    parser.ExternalEntityRefHandler = builder.refuse_external
    parser.SkippedEntityHandler = builder.refuse_entity
    parser.SetParamEntityParsing(expat.XML_PARAM_ENTITY_PARSING_NEVER)
    return parser


def _refused(given: str) -> AlertError:
    return AlertError(
        given=given,
        allowed="plain elements, attributes and text",
        advice="take the message from its sender again; do not use this file",
    )
