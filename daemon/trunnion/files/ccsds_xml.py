"""Navigation messages in XML, read by defusedxml: no entities, no outside references."""

from xml.etree.ElementTree import Element, ParseError

from defusedxml.common import DefusedXmlException
from defusedxml.ElementTree import fromstring

from trunnion.files.ccsds import Entry


def messages(text: str, tag: str) -> list[Element]:
    """The messages of one kind in a text: its root, or those in the `ndm` that is its root.

    Raises ValueError for what is no XML, or holds no such message.
    """
    try:
        root = fromstring(text, forbid_dtd=True)
    except ParseError as error:
        raise ValueError(f"expected XML: {error}") from None
    except DefusedXmlException:
        raise ValueError("expected XML without a document type and entities, got some") from None
    except (ValueError, RecursionError) as error:
        raise ValueError(f"expected XML: {str(error)[:80]}") from None
    found = [root] if local_name(root) == tag else [e for e in root if local_name(e) == tag]
    if not found:
        raise ValueError(f"expected a message <{tag}>, got <{local_name(root)[:40]}>")
    return found


def local_name(element: Element) -> str:
    """The tag without its namespace."""
    return str(element.tag).rpartition("}")[2]


def child(element: Element, tag: str) -> Element | None:
    """The first child of this name."""
    return next((each for each in element if local_name(each) == tag), None)


def content(element: Element) -> str:
    """The element's text."""
    return (element.text or "").strip()


def entries(element: Element | None) -> list[Entry]:
    """The keywords among an element's children, comments left out."""
    children = () if element is None else element
    return [
        Entry(None, local_name(each), content(each))
        for each in children
        if local_name(each) != "COMMENT"
    ]
