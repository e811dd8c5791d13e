"""The written form of a formula: one text, one tree; printed, evaluated, and turned into algebra from that tree."""

from calcbook.records.written.tree import Node, parse, symbols_of

__all__ = ["Node", "parse", "symbols_of"]
