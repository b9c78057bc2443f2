"""Press: one PDF of a whole class cut into one file for each candidate.

pypdf reads; the files are written here, because every paper shares its fonts with all others: each shared object is
turned into bytes once for the whole class, not once for each paper.
"""

from __future__ import annotations

import io
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import TYPE_CHECKING, Any

from authoring.faults import OutsideError

if TYPE_CHECKING:
    from pypdf import PageObject, PdfReader

_CATALOG, _TREE = 1, 2  # the object numbers of the two objects that are our own


@dataclass(frozen=True, slots=True)
class _Reference:
    """A place in an object's bytes where the number of another object goes."""

    number: int


_Parts = tuple[bytes | _Reference, ...]


@dataclass(slots=True)
class _Class:
    """The PDF of the class, with the bytes of its objects as far as they were needed."""

    reader: PdfReader
    pages: Mapping[int, PageObject]
    bodies: dict[int, _Parts] = field(default_factory=dict)

    def body(self, number: int) -> _Parts:
        """The bytes of an object, in pieces around its references."""
        if number not in self.bodies:
            self.bodies[number] = _joined(self._read(number))
        return self.bodies[number]

    def _read(self, number: int) -> Iterator[bytes | _Reference]:
        if number in self.pages:
            return _dictionary(dict(self.pages[number].items()) | {"/Parent": _Reference(0)})
        return _written(self.reader.get_object(number))


def split_pdf(pdf: Path, ranges: Mapping[str, tuple[int, int]], into: Path) -> tuple[Path, ...]:
    """Write `name.pdf` for each range of pages (first and last, counted from 1); the folder is made where missing.

    The files carry no metadata, so no dates, and the same pages give the same bytes. Raises OutsideError where the
    PDF cannot be read or has fewer pages than a range asks for.
    """
    from pypdf import PdfReader
    from pypdf.errors import PyPdfError

    into.mkdir(parents=True, exist_ok=True)
    try:
        reader = PdfReader(pdf)
        whole = _Class(reader, {_number_of(page): page for page in reader.pages})
        numbers = list(whole.pages)
        made: list[Path] = []
        for name, (first, last) in ranges.items():
            if not 1 <= first <= last <= len(numbers):
                raise OutsideError(f"{pdf.name} has {len(numbers)} pages; {name} wants {first} to {last}")
            made.append(_put(_file(whole, numbers[first - 1 : last]), into / f"{name}.pdf"))
    except (PyPdfError, OSError) as error:
        raise OutsideError(f"{pdf.name} cannot be split: {error}") from error
    return tuple(made)


def _number_of(page: Any) -> int:
    reference = page.indirect_reference
    if reference is None:
        raise OutsideError("a page of the PDF has no object number of its own")
    return int(reference.idnum)


def _put(content: bytes, target: Path) -> Path:
    beside = target.with_name(f".{target.name}.part")
    beside.write_bytes(content)
    return beside.replace(target)


def _file(whole: _Class, pages: Sequence[int]) -> bytes:
    """A PDF of these pages and of what they refer to, numbered anew in the order of meeting."""
    new = {0: _TREE}
    order: list[int] = []
    waiting = list(reversed(pages))
    while waiting:
        number = waiting.pop()
        if number in new:
            continue
        new[number] = _TREE + 1 + len(order)
        order.append(number)
        refers = [p.number for p in whole.body(number) if isinstance(p, _Reference)]
        waiting += [one for one in reversed(refers) if one not in whole.pages]
    kids = b" ".join(b"%d 0 R" % new[number] for number in pages)
    bodies = [b"<</Type/Catalog/Pages %d 0 R>>" % _TREE, b"<</Type/Pages/Count %d/Kids[%s]>>" % (len(pages), kids)]
    bodies += [_numbered(whole.body(number), new) for number in order]
    return _assembled(bodies)


def _numbered(parts: _Parts, new: Mapping[int, int]) -> bytes:
    """An object's bytes with the new numbers; a page that is not taken along is null."""
    return b"".join(
        part if isinstance(part, bytes) else b"%d 0 R" % new[part.number] if part.number in new else b"null"
        for part in parts
    )


def _assembled(bodies: Sequence[bytes]) -> bytes:
    out = [b"%PDF-1.5\n%\xe2\xe3\xcf\xd3\n"]
    position = len(out[0])
    table = [b"0000000000 65535 f \n"]
    for number, body in enumerate(bodies, _CATALOG):
        piece = b"%d 0 obj\n%s\nendobj\n" % (number, body)
        table.append(b"%010d 00000 n \n" % position)
        out.append(piece)
        position += len(piece)
    tail = b"xref\n0 %d\n%strailer\n<</Size %d/Root %d 0 R>>\nstartxref\n%d\n%%%%EOF\n"
    out.append(tail % (len(table), b"".join(table), len(table), _CATALOG, position))
    return b"".join(out)


def _written(value: Any) -> Iterator[bytes | _Reference]:
    """A value of pypdf's as bytes and references."""
    from pypdf.generic import ArrayObject, DictionaryObject, IndirectObject, StreamObject

    if isinstance(value, _Reference):
        yield value
    elif isinstance(value, IndirectObject):
        yield _Reference(value.idnum)
    elif isinstance(value, StreamObject):
        data: bytes = value._data
        yield from _dictionary(dict(value.items()) | {"/Length": len(data)})
        yield b"\nstream\n" + data + b"\nendstream"
    elif isinstance(value, DictionaryObject):
        yield from _dictionary(value)
    elif isinstance(value, ArrayObject):
        yield b"["
        for item in list.__iter__(value):
            yield from _written(item)
            yield b" "
        yield b"]"
    elif isinstance(value, int) and type(value) is int:
        yield b"%d" % value
    else:
        buffer = io.BytesIO()
        value.write_to_stream(buffer)
        yield buffer.getvalue()


def _dictionary(entries: Mapping[Any, Any]) -> Iterator[bytes | _Reference]:
    yield b"<<"
    for key, value in entries.items():
        yield from _written(_name(key))
        yield b" "
        yield from _written(value)
        yield b"\n"
    yield b">>"


def _name(key: str) -> Any:
    from pypdf.generic import NameObject

    return key if isinstance(key, NameObject) else NameObject(key)


def _joined(parts: Iterator[bytes | _Reference]) -> _Parts:
    """Neighbouring bytes as one piece."""
    out: list[bytes | _Reference] = []
    run: list[bytes] = []
    for part in parts:
        if isinstance(part, bytes):
            run.append(part)
            continue
        out += [b"".join(run), part]
        run = []
    return (*out, b"".join(run))
