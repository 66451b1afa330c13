r"""TeX of prose -> MathML, with nothing in it but mathematics."""

from __future__ import annotations

from xml.etree import ElementTree as ET

_NAMESPACE = "{http://www.w3.org/1998/Math/MathML}"
ET.register_namespace("", _NAMESPACE.strip("{}"))
_ELEMENTS = frozenset(
    [
        "math",
        "mrow",
        "mi",
        "mn",
        "mo",
        "ms",
        "mtext",
        "mspace",
        "mfrac",
        "msqrt",
        "mroot",
        "mstyle",
        "merror",
        "mpadded",
        "mphantom",
        "msub",
        "msup",
        "msubsup",
        "munder",
        "mover",
        "munderover",
        "mmultiscripts",
        "mprescripts",
        "none",
        "mtable",
        "mtr",
        "mtd",
        "menclose",
        "mfenced",
    ]
)
_ATTRIBUTES = frozenset(
    [
        "display",
        "displaystyle",
        "mathvariant",
        "scriptlevel",
        "width",
        "height",
        "depth",
        "linethickness",
        "form",
        "fence",
        "separator",
        "stretchy",
        "symmetric",
        "lspace",
        "rspace",
        "minsize",
        "maxsize",
        "largeop",
        "movablelimits",
        "accent",
        "accentunder",
        "columnalign",
        "rowspan",
        "columnspan",
        "columnspacing",
        "rowspacing",
        "notation",
        "open",
        "close",
    ]
)


def mathml_of(tex: str, *, block: bool) -> str | None:
    r"""Return TeX as MathML, or None where it cannot be read.

    Elements and attributes outside mathematics, such as the target of `\href`, are left out.
    """
    from latex2mathml.converter import convert  # here, since few calcs hold TeX and it loads slowly

    try:
        root = ET.fromstring(convert(tex, display="block" if block else "inline"))  # noqa: S314 - our own text
    except Exception:  # noqa: BLE001, RUF100 - the converter raises whatever it stumbles over
        return None
    if any("\\" in (element.text or "") for element in root.iter()):  # a command it does not know
        return None
    _clean(root)
    return ET.tostring(root, encoding="unicode")


def _clean(element: ET.Element) -> None:
    kept = {k: v for k, v in element.attrib.items() if k in _ATTRIBUTES}
    element.attrib.clear()
    element.attrib.update(kept)
    for child in element:
        if child.tag.removeprefix(_NAMESPACE) not in _ELEMENTS:
            child.tag = f"{_NAMESPACE}mrow"
        _clean(child)
