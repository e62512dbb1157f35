"""The names that XML gives to the parts of a Word document."""

from __future__ import annotations

WORD = "{http://schemas.openxmlformats.org/wordprocessingml/2006/main}"
WORD_2010 = "{http://schemas.microsoft.com/office/word/2010/wordml}"
DRAWING = "{http://schemas.openxmlformats.org/drawingml/2006/wordprocessingDrawing}"
SHAPE = "{http://schemas.microsoft.com/office/word/2010/wordprocessingShape}"
XML = "{http://www.w3.org/XML/1998/namespace}"
