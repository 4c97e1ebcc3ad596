"""Make the demo articles and their truth file: `python corpus_demo/make.py [DIRECTORY]`.

Raw data are simulated with fixed seeds (trials.py) and analysed with scipy.stats (analyses.py);
every number is rounded by one function here, filled into the prose (prose/*.txt) and, for
the few planted errors (plants.py), changed after that. Without DIRECTORY the files land beside this script.
"""

from __future__ import annotations

import json
import sys
import textwrap
from collections.abc import Mapping
from dataclasses import asdict, dataclass, field
from decimal import ROUND_HALF_UP, Decimal
from pathlib import Path

import pypdfium2
import regex
from marked import WRITERS
from plants import PLANTS, Plant
from reportlab.platypus import Flowable
from tables import grid_of
from trials import OVENS, TRIALS, Results
from typeset import bars, blocks, manuscript, plain, two_columns

HERE = Path(__file__).resolve().parent
Slots = dict[str, dict[str, str]]


@dataclass(frozen=True)
class Style:
    """How one journal writes numbers: decimals by quantity, zeros before the point, spaces."""

    decimals: Mapping[str, int]
    zero: bool = False
    spaced: bool = True
    p_decimals: tuple[int, int] = (3, 3)
    special: Mapping[tuple[str, str], int] = field(default_factory=dict)


USUAL = {
    "m": 1, "sd": 1, "difference": 1, "lo": 1, "hi": 1, "t": 2, "F": 2, "chi2": 2, "r": 2, "d": 2,
    "v": 2, "eta2": 2, "partial_eta2": 2, "epsilon": 2, "percent": 1, "power": 2,
    "liking": 2, "sourness": 2, "rr": 2, "or": 2, "b": 2, "se": 2, "r2": 2, "ss": 2, "ms": 2, "ss_error": 2, "ms_error": 2,
}  # fmt: skip
BOUNDED = {"p", "r", "v", "eta2", "partial_eta2", "epsilon", "power", "liking", "sourness", "r2"}
WASTE = {("waste", name): 2 for name in ("difference", "lo", "hi")}
RISKS = {(risk, end): 2 for risk in ("burns", "scars") for end in ("lo", "hi")}
JARS = {("rise", "m"): 2, ("rise", "sd"): 2, ("proofing", "m"): 0, ("proofing", "sd"): 0}
STYLES = {
    "steam_oven.pdf": Style(USUAL | {"lo": 2, "hi": 2}),
    "bench_coaching.pdf": Style(
        USUAL | {"percent": 0}, zero=True, spaced=False, p_decimals=(2, 3), special=WASTE
    ),
    "starter_hydration.md": Style(USUAL, zero=True, special=JARS),
    "tasting_panel.txt": Style(USUAL | {"m": 2, "sd": 2, "lo": 2, "hi": 2, "percent": 0}),
    "oven_gloves.xml": Style(USUAL | {"percent": 0}, zero=True, special=RISKS),
    "recipe_recall.docx": Style(USUAL | {"m": 2, "sd": 2}),
    "crumb_structure.html": Style(USUAL | {"m": 2, "sd": 2}, zero=True),
    "evening_class.html": Style(USUAL | {"m": 2, "sd": 2, "lo": 2, "hi": 2, "percent": 0}),
}  # fmt: skip
HEADS = {
    "steam_oven.pdf": "Proceedings of the Quernford Symposium on Hearth Baking, Volume 11",
    "bench_coaching.pdf": "Coaching at the bench: manuscript submitted to the Guild Journal of Bread",
}


def printed(value: float, decimals: int, *, zero: bool = True) -> str:
    """Round half up to so many decimals, with a Unicode minus and perhaps no zero before the point."""
    rounded = Decimal(repr(float(value))).quantize(Decimal(1).scaleb(-decimals), ROUND_HALF_UP)
    text = str(abs(rounded))
    if not zero:
        text = text.removeprefix("0")
    return f"−{text}" if rounded < 0 else text


def printed_p(p: float, style: Style) -> str:
    """Write a relation and a p as the journal does."""
    space = " " if style.spaced else ""
    large, small = style.p_decimals
    if p < 0.001:
        return f"<{space}{printed(0.001, 3, zero=style.zero)}"
    return f"={space}{printed(p, large if p >= 0.01 else small, zero=style.zero)}"


def slots(results: Results, style: Style) -> Slots:
    """Write every number of a trial as text: result -> quantity -> text."""
    return {
        result: {name: _slot(result, name, value, style, "r" in numbers) for name, value in numbers.items()}
        | {"stars": _stars(numbers.get("p", 1.0))}
        for result, numbers in results.items()
    }


def _stars(p: float) -> str:
    return r"\*" * sum(p < level for level in (0.05, 0.01, 0.001))


def _slot(result: str, name: str, value: float, style: Style, is_correlation: bool) -> str:
    base = (
        name.rstrip("0123456789")
        if name not in ("eta2", "partial_eta2", "chi2", "df1", "df2", "r2")
        else name
    )
    if base in ("p", "pF"):
        return printed_p(value, style)
    if base in ("n", "c", "N") or (base.startswith("df") and float(value).is_integer()):
        return str(int(value))
    if base.startswith("df"):
        return printed(value, 1)
    bounded = base in BOUNDED or (is_correlation and base in ("lo", "hi"))
    decimals = 2 if bounded else style.special.get((result, base), style.decimals[base])
    return printed(value, decimals, zero=style.zero or not bounded)


def make(directory: Path) -> None:
    """Write the articles and truth.json into `directory`."""
    truth = {}
    for name, simulate in TRIALS.items():
        results = simulate()
        numbers = slots(results, STYLES[name])
        plants = [plant for plant in PLANTS if plant.file == name]
        true = {plant: numbers[plant.result][plant.slot] for plant in plants}
        for plant in plants:
            numbers[plant.result][plant.slot] = plant.change
        template = (HERE / "prose" / name).with_suffix(".txt").read_text(encoding="utf-8")
        prose = template.format_map(numbers)
        path = directory / name
        _write(path, prose, results)
        truth[name] = {
            "results": len(regex.findall(r"\[(?:t|F|chi2|r)\]\}", template)),
            "planted": [_truth_of(plant, true[plant], numbers, prose, path) for plant in plants],
        }
    text = json.dumps(truth, ensure_ascii=False, indent=2)
    (directory / "truth.json").write_text(text + "\n", encoding="utf-8")


def _write(path: Path, prose: str, results: Results) -> None:
    if path.suffix in WRITERS:
        WRITERS[path.suffix](prose, path)
    elif path.suffix == ".md":
        path.write_text(prose, encoding="utf-8")
    elif path.suffix == ".txt":
        path.write_text(_wrapped(prose), encoding="utf-8")
    elif path.stem == "steam_oven":
        two_columns(prose, path, head=HEADS[path.name], figure=_figure(results))
    else:
        manuscript(prose, path, head=HEADS[path.name])


def _wrapped(prose: str) -> str:
    paragraphs = ("\n".join(_lines(line) for line in p.split("\n")) for p in prose.strip().split("\n\n"))
    return "\n\n".join(paragraphs) + "\n"


def _lines(line: str) -> str:
    return textwrap.fill(line, 76, break_long_words=False, break_on_hyphens=False)


def _figure(results: Results) -> Flowable:
    stone, moving, white = (results[k] for k in ("rye_stone", "rye_convection", "white"))
    middle = results["white_stone"]
    heights = {
        "white": [(white["m1"], white["sd1"]), (middle["m"], middle["sd"]), (white["m2"], white["sd2"])],
        "rye": [(stone["m1"], stone["sd1"]), (stone["m2"], stone["sd2"]), (moving["m2"], moving["sd2"])],
    }
    return bars(heights, OVENS, unit="mm", top=120)


def _truth_of(plant: Plant, true: str, numbers: Slots, prose: str, path: Path) -> dict[str, object]:
    """Say what was planted, with the page, line, section or row of a table in which its snippet stands."""
    snippet = plant.snippet.format_map(numbers)
    facts = {
        k: v for k, v in asdict(plant).items() if k not in ("file", "result", "slot", "change", "snippet")
    }
    place: dict[str, object] = {}
    if path.suffix in WRITERS:
        place = _section_or_row_of(snippet, prose)
    elif path.suffix == ".pdf":
        place |= _page_of(plain(snippet), path)
    else:
        place |= _line_of(snippet, path)
    if path.suffix in (".pdf", *WRITERS):
        snippet = plain(snippet).replace("|", " | ")
    return {"printed": snippet, "changed_to": plant.change, "true": true, **place, **facts}


def _section_or_row_of(snippet: str, prose: str) -> dict[str, object]:
    section, found = "", []
    for kind, text in blocks(prose):
        if kind in ("##", "###"):
            section = text.strip()
        elif kind == "@table":
            found += [
                {"table": grid_of(text).label, "row": plain(line.split("|")[0])}
                for line in text.split("\n")
                if snippet in line.replace("|= ", "|")
            ]
        elif snippet in text:
            found.append({"section": section})
    if len(found) != 1:
        raise SystemExit(f"{snippet!r} must stand once (found {found})")
    return found[0]


def _page_of(snippet: str, path: Path) -> dict[str, int]:
    wanted = "".join(snippet.split())
    document = pypdfium2.PdfDocument(path)
    pages = ["".join(page.get_textpage().get_text_range().split()) for page in document]
    found = [number for number, text in enumerate(pages, 1) if wanted in text]
    if len(found) != 1:
        raise SystemExit(f"{path.name}: {snippet!r} must stand on one page (found on {found})")
    return {"page": found[0]}


def _line_of(snippet: str, path: Path) -> dict[str, int]:
    text = path.read_text(encoding="utf-8")
    found = list(regex.finditer(r"\s+".join(map(regex.escape, snippet.split())), text))
    if len(found) != 1:
        raise SystemExit(f"{path.name}: {snippet!r} must stand once (found {len(found)} times)")
    return {"line": text.count("\n", 0, found[0].start()) + 1}


if __name__ == "__main__":
    make(Path(sys.argv[1]) if len(sys.argv) > 1 else HERE)
