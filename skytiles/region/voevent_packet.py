"""The frame of a VOEvent message: root, version, role, and its parts, each at most once."""

from dataclasses import dataclass

from skytiles.errors import AlertError
from skytiles.region.alert import ROLES, Role
from skytiles.region.xml_tree import XmlElement, read_xml

_NAMESPACE = "http://www.ivoa.net/xml/VOEvent/v"
VERSIONS = ("2.0", "2.1")
_PARTS = ("Who", "What", "WhereWhen", "How", "Why", "Citations", "Description", "Reference")
_LONGEST_IVORN = 200


@dataclass(frozen=True)
class VoeventPacket:
    """A message of VOEvent 2.0 or 2.1, judged as a whole but not yet understood."""

    ivorn: str
    version: str
    role: Role
    root: XmlElement

    def part(self, name: str) -> XmlElement | None:
        """One of its parts, or nothing."""
        return self.root.find(name)


def read_voevent_packet(data: bytes) -> VoeventPacket:
    """A VOEvent message from XML.

    Parameters
    ----------
    data : bytes    the whole document

    Returns
    -------
    VoeventPacket    AlertError for hostile or damaged XML, and for what breaks the standard

    Source: IVOA VOEvent 2.0 (2011-07-11), section 3.1, and 2.1 (proposed, 2026-02-25).
    """
    root = read_xml(data)
    version = _version(root)
    own = f"{_NAMESPACE}{version}"
    # Parts stand without a namespace; some senders write that of the root. Others are not ours.
    root.children = [child for child in root.children if child.namespace in ("", own)]
    names = [child.name for child in root.children]
    repeated = [part for part in _PARTS if names.count(part) > 1]
    if repeated:
        raise _refused(f"it has {' and '.join(repeated)} more than once", "each part at most once")
    ivorn = " ".join(root.attributes.get("ivorn", "").split())
    if not ivorn or len(ivorn) > _LONGEST_IVORN:
        raise _refused(f"its ivorn is {ivorn[:60]!r}", "an ivorn, the message's own name")
    return VoeventPacket(ivorn=ivorn, version=version, role=_role(root), root=root)


def _version(root: XmlElement) -> str:
    version = root.attributes.get("version", "").strip()
    is_ours = version in VERSIONS and root.namespace.rstrip("/") == f"{_NAMESPACE}{version}"
    if root.name != "VOEvent" or not is_ours:
        said = f"{root.name[:40]!r}, version {version[:20]!r}, namespace {root.namespace[:80]!r}"
        raise _refused(
            f"its root is {said}",
            f"VOEvent 2.0 or 2.1 in its namespace, {_NAMESPACE}2.0 or ...v2.1",
        )
    return version


def _role(root: XmlElement) -> Role:
    given = root.attributes.get("role", "observation").strip()
    for role in ROLES:
        if given == role:
            return role
    raise _refused(f"its role is {given[:60]!r}", "observation, prediction, utility or test")


def _refused(given: str, allowed: str) -> AlertError:
    return AlertError(
        given=given,
        allowed=allowed,
        advice="ask the sender for a message of VOEvent 2.0 or 2.1, or type the direction by hand",
    )
