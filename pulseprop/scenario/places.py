"""Where in a TOML text a key stands: line and column. The parser is loaded only when a message needs it."""

from __future__ import annotations

import tomllib
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

__all__ = ["Keys", "Places", "key_path", "places_in"]

Keys = tuple[str | int, ...]
"""Keys and, into lists, indices counted from 0."""


def key_path(keys: Keys) -> str:
    """ "path.2.thickness": the keys in words, list entries counted from 1."""
    return ".".join(str(key + 1) if isinstance(key, int) else key for key in keys)


@dataclass(frozen=True)
class Places:
    """Line and column, both counted from 1, of keys and of values. A table's place is its header."""

    keys: dict[Keys, tuple[int, int]]
    values: dict[Keys, tuple[int, int]]

    def of_key(self, keys: Keys) -> tuple[int, int] | None:
        """Place of the key, or of the nearest table around it that the text holds."""
        return self._of(self.keys, keys)

    def of_value(self, keys: Keys) -> tuple[int, int] | None:
        """Place of the value, or of the nearest table around it that the text holds."""
        return self.values.get(keys) or self._of(self.keys, keys)

    def _of(self, known: dict[Keys, tuple[int, int]], keys: Keys) -> tuple[int, int] | None:
        return next((known[keys[:end]] for end in range(len(keys), 0, -1) if keys[:end] in known), None)


def places_in(text: str) -> Places:
    """The places of all keys and values of a valid TOML text."""
    import tree_sitter_toml
    from tree_sitter import Language, Parser

    tree = Parser(Language(tree_sitter_toml.language())).parse(text.encode())
    finder = _Finder(text.encode().split(b"\n"))
    finder.document(tree.root_node)
    return Places(finder.keys, finder.values)


class _Finder:
    """Walks a syntax tree and notes places; `counts` holds how many entries each list of tables has so
    far."""

    def __init__(self, lines: list[bytes]) -> None:
        self.lines = lines
        self.keys: dict[Keys, tuple[int, int]] = {}
        self.values: dict[Keys, tuple[int, int]] = {}
        self.counts: dict[Keys, int] = {}

    def document(self, root: Any) -> None:
        for node in root.named_children:
            if node.type == "pair":
                self.pair((), node)
            elif node.type in ("table", "table_array_element"):
                self.table(node)

    def table(self, node: Any) -> None:
        header, *pairs = (child for child in node.named_children if child.type != "comment")
        *outer, last = _keys(header)
        prefix = (*self.entered(outer), last)
        if node.type == "table_array_element":
            self.counts[prefix] = self.counts.get(prefix, 0) + 1
            self.keys.setdefault(prefix, self.place(header))
        prefix = tuple(self.entered([*outer, last]))
        self.note(prefix, header)
        for pair in pairs:
            self.pair(prefix, pair)

    def entered(self, names: list[str]) -> Iterator[str | int]:
        """The names with the index of the latest entry behind each that is a list of tables."""
        keys: Keys = ()
        for name in names:
            keys = (*keys, name)
            yield name
            if keys in self.counts:
                yield self.counts[keys] - 1
                keys = (*keys, self.counts[keys] - 1)

    def pair(self, prefix: Keys, node: Any) -> None:
        key, value = (child for child in node.named_children if child.type != "comment")
        keys = (*prefix, *_keys(key))
        self.note(keys, key)
        self.value(keys, value)

    def value(self, keys: Keys, node: Any) -> None:
        self.values[keys] = self.place(node)
        self.keys.setdefault(keys, self.place(node))
        members = [child for child in node.named_children if child.type != "comment"]
        if node.type == "inline_table":
            for pair in members:
                self.pair(keys, pair)
        elif node.type == "array":
            for index, member in enumerate(members):
                self.value((*keys, index), member)

    def note(self, keys: Keys, node: Any) -> None:
        self.keys[keys] = self.place(node)

    def place(self, node: Any) -> tuple[int, int]:
        row, column = node.start_point
        return row + 1, len(self.lines[row][:column].decode()) + 1


def _keys(node: Any) -> list[str]:
    """The parts of a key, bare, quoted or dotted."""
    table: Any = tomllib.loads(f"{node.text.decode()} = 0")
    names = []
    while isinstance(table, dict):
        name, table = next(iter(table.items()))
        names.append(name)
    return names
