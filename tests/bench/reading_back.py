"""Reading back what was printed, with other programs' eyes: text, codes and pictures of PDF pages."""

from __future__ import annotations

import io
from typing import Any

import pypdf
import pypdfium2
import zxingcpp


def texts(pdf: bytes) -> list[str]:
    """Return the text of each page, blanks and line feeds as single spaces."""
    return [" ".join(page.extract_text().split()) for page in pypdf.PdfReader(io.BytesIO(pdf)).pages]


def packed(pdf: bytes) -> str:
    """Return all text without any blanks: superscripts and broken lines then read as one word."""
    return "".join("".join(texts(pdf)).split())


def pictures(pdf: bytes, dpi: int) -> list[Any]:
    """Return the pages as a printer of `dpi` dots an inch sets them: every dot black (0) or white (255)."""
    import numpy as np

    document = pypdfium2.PdfDocument(pdf)
    try:
        found = []
        for number in range(len(document)):
            page = document[number]
            grey = page.render(scale=dpi / 72, grayscale=True).to_numpy().squeeze()
            found.append(np.where(grey < 128, 0, 255).astype(np.uint8))
            page.close()
        return found
    finally:
        document.close()


def codes(pdf: bytes, dpi: int) -> list[str]:
    """Return the texts of all codes, page by page, sorted within a page."""
    read = []
    for picture in pictures(pdf, dpi):
        found = zxingcpp.read_barcodes(picture, formats=zxingcpp.BarcodeFormat.QRCode)
        read += sorted(code.text for code in found)
    return read
