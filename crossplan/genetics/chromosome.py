"""The chromosomes of *Drosophila melanogaster* and their arms.

X (called 1 in the standard notation), Y, and the autosomes 2, 3 and 4. Arms: X; 2L, 2R; 3L, 3R; 4.
"""

from __future__ import annotations

from typing import Final, Literal

ChromosomeName = Literal["X", "Y", "2", "3", "4"]

#: The pairs of a fly, in the order in which a genotype writes them; the Y is a partner of the X.
PAIRS: Final[tuple[str, ...]] = ("X", "2", "3", "4")
AUTOSOMES: Final[tuple[str, ...]] = ("2", "3", "4")
CHROMOSOME_OF_ARM: Final[dict[str, str]] = {
    "X": "X", "1": "X", "2L": "2", "2R": "2", "3L": "3", "3R": "3", "4": "4", "Y": "Y",
}  # fmt: skip

Sex = Literal["female", "male"]
FEMALE: Final = "female"
MALE: Final = "male"
SEXES: Final[tuple[Sex, Sex]] = ("female", "male")
