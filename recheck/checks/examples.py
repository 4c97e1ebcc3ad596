"""Examples of checks that stand in tables."""

from __future__ import annotations


def table(caption: str, head: str, *rows: str, note: str = "") -> str:
    """A Markdown table of cells divided by `|`, with its caption above and its note below."""
    columns = head.count("|") + 1
    lines = [head, "|".join(["---"] * columns), *rows]
    told = "\n".join(f"| {line} |" if "---" not in line else f"|{line}|" for line in lines)
    return "\n\n".join(filter(None, (caption, told, note))) + "\n"
