"""The front matter as a whole: the cover and every part, in the order of the package."""

from __future__ import annotations

from calcbook.publish.front.cables import cable_schedule
from calcbook.publish.front.contents import basis, register
from calcbook.publish.front.cover import cover
from calcbook.publish.front.criteria import compliance, nearest
from calcbook.publish.front.listing import Front
from calcbook.publish.front.material import Material
from calcbook.publish.front.open_items import adopted_values, open_items
from calcbook.publish.front.symbols import symbols
from calcbook.publish.front.where_used import table_status, where_used

_PARTS = (
    register, basis, open_items, adopted_values, compliance, nearest, cable_schedule, table_status, where_used, symbols
)  # fmt: skip


def front(material: Material) -> Front:
    """The front matter of a package."""
    return Front(cover(material), tuple(part(material) for part in _PARTS), sum(material.page_counts.values()))
