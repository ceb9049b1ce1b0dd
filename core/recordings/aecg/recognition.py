"""Whether a file is an annotated ECG, told from its first bytes."""

from __future__ import annotations

import re

ROOT = "AnnotatedECG"
_ROOT_TAG = re.compile(rf"<(?:[^\s<>/:]+:)?{ROOT}(?=[\s/>])")
_ROOT_DECLARED = re.compile(rf"<!DOCTYPE\s+(?:[^\s<>/:]+:)?{ROOT}(?=[\s>\[])")


def looks_like_aecg(start: bytes) -> bool:
    """Whether the first bytes of a file are XML whose root is an annotated ECG.

    The root counts, whatever its prefix: XML that only mentions one is something else.
    """
    text = _decoded(start).lstrip("\N{ZERO WIDTH NO-BREAK SPACE} \r\n\t")
    while text.startswith(("<?", "<!--")):
        text = text.partition("?>" if text.startswith("<?") else "-->")[2].lstrip(" \r\n\t")
    if text.startswith("<!DOCTYPE"):
        # Recognised so that it is refused for what it is.
        return bool(_ROOT_DECLARED.match(text) or _ROOT_TAG.search(text))
    return _ROOT_TAG.match(text) is not None


def _decoded(start: bytes) -> str:
    # Without a byte order mark, the first character tells the order: it is "<" in any XML.
    if start.startswith((b"\xff\xfe", b"<\0")):
        return start.decode("utf-16-le", errors="replace")
    if start.startswith((b"\xfe\xff", b"\0<")):
        return start.decode("utf-16-be", errors="replace")
    return start.decode("utf-8", errors="replace")
