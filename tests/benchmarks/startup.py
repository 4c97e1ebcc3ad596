"""How long a whole process takes beside the bare imports that it cannot do without."""

from __future__ import annotations

import subprocess
import sys
import tempfile
import time
from pathlib import Path

ONE_PAGE = (
    "Loaves from the steam oven rose higher (M = 92.4, SD = 6.1, n = 18) than loaves from the dry oven "
    "(M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, p = .003, d = 1.08. The bakers scored the crumb on a "
    "seven-point panel and the scores did not differ between flours, F(2, 57) = 1.31, p = .278.\n\n"
) * 6


def _best(command: list[str], runs: int) -> float:
    times = []
    for _ in range(runs):
        start = time.perf_counter()
        subprocess.run(command, check=False, capture_output=True)
        times.append(time.perf_counter() - start)
    return min(times)


def ratio(ours: list[str], bare: list[str], *, rounds: int = 4, runs: int = 2) -> float:
    """Fastest of ours over fastest of the bare one, both taken in turn."""
    mine, theirs = [], []
    for _ in range(rounds):
        mine.append(_best(ours, runs))
        theirs.append(_best(bare, runs))
    return min(mine) / min(theirs)


def version_ratio() -> float:
    """`recheck --version` over `import click`."""
    return ratio([sys.executable, "-m", "recheck", "--version"], [sys.executable, "-c", "import click"])


def one_page_ratio() -> float:
    """Auditing a page of text over importing what it needs."""
    with tempfile.TemporaryDirectory() as folder:
        page = Path(folder, "page.txt")
        page.write_text(ONE_PAGE, encoding="utf-8")
        ours = [sys.executable, "-m", "recheck", "audit", str(page)]
        return ratio(ours, [sys.executable, "-c", "import numpy, scipy.special, regex"])
