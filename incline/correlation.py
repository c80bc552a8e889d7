"""Which inputs are correlated, as blocks of a correlation matrix."""

from __future__ import annotations

from dataclasses import dataclass
from difflib import get_close_matches
from typing import TYPE_CHECKING

from incline.errors import Defect, FieldDataError

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.record import Correlation
    from incline.sources import Source

    Floats = NDArray[np.float64]

__all__ = ["Block", "blocks_of", "correlated"]


@dataclass(frozen=True, slots=True, eq=False)
class Block:
    """Sources correlated among themselves: their indices and correlation matrix."""

    members: tuple[int, ...]
    matrix: Floats

    def root(self) -> Floats:
        """A matrix whose product with its transpose is the correlation matrix."""
        import numpy as np

        values, vectors = np.linalg.eigh(self.matrix)
        root: Floats = vectors * np.sqrt(np.clip(values, 0.0, None))
        return root


def blocks_of(sources: Sequence[Source], stated: Sequence[Correlation]) -> tuple[Block, ...]:
    """Blocks from the sources' groups and the trial's own coefficients.

    Raises FieldDataError for a name that no input has, and for coefficients that cannot hold
    together (a matrix that is not positive semi-definite).
    """
    import numpy as np

    pairs = _group_pairs(sources) | _stated_pairs(sources, stated)
    blocks = []
    for members in _components(len(sources), pairs):
        matrix = np.eye(len(members))
        for a, i in enumerate(members):
            for b, j in enumerate(members):
                if a < b:
                    matrix[a, b] = matrix[b, a] = pairs.get((i, j), 0.0)
        # Rounding of the eigenvalues of a matrix of ones is of this order.
        if np.linalg.eigvalsh(matrix)[0] < -1e-9:
            raise FieldDataError(_impossible(sources, members, stated))
        blocks.append(Block(members, matrix))
    return tuple(blocks)


def correlated(values: Floats, blocks: Sequence[Block]) -> Floats:
    """``values`` (..., n) multiplied by the whole correlation matrix."""
    result = values.copy()
    for block in blocks:
        index = list(block.members)
        result[..., index] = values[..., index] @ block.matrix
    return result


def _group_pairs(sources: Sequence[Source]) -> dict[tuple[int, int], float]:
    pairs = {}
    for i, a in enumerate(sources):
        for j in range(i + 1, len(sources)):
            b = sources[j]
            if a.group and a.group == b.group and a.shared != 0.0:
                pairs[i, j] = a.shared
    return pairs


def _stated_pairs(
    sources: Sequence[Source], stated: Sequence[Correlation]
) -> dict[tuple[int, int], float]:
    index = {s.name: i for i, s in enumerate(sources)}
    defects = []
    pairs = {}
    for c in stated:
        for name in (c.a, c.b):
            if name not in index:
                near = get_close_matches(name, index, n=1)
                hint = f"did you mean {near[0]}?" if near else ""
                defects.append(
                    Defect(
                        c.where,
                        "input-unknown",
                        f'"{name}"',
                        "an input as the budget names it",
                        hint,
                    )
                )
        if c.a in index and c.b in index and c.a != c.b:
            i, j = sorted((index[c.a], index[c.b]))
            pairs[i, j] = c.r
    if defects:
        raise FieldDataError(defects)
    return pairs


def _components(count: int, pairs: dict[tuple[int, int], float]) -> list[tuple[int, ...]]:
    """Groups of indices joined by pairs, each in ascending order."""
    parent = list(range(count))

    def top(i: int) -> int:
        while parent[i] != i:
            i = parent[i]
        return i

    for i, j in pairs:
        parent[top(j)] = top(i)
    groups: dict[int, list[int]] = {}
    for i in range(count):
        groups.setdefault(top(i), []).append(i)
    return [tuple(g) for g in groups.values() if len(g) > 1]


def _impossible(
    sources: Sequence[Source], members: tuple[int, ...], stated: Sequence[Correlation]
) -> list[Defect]:
    names = {sources[i].name for i in members}
    wheres = [c for c in stated if c.a in names and c.b in names]
    return [
        Defect(
            c.where,
            "correlation-impossible",
            f"r = {c.r:g} between {c.a} and {c.b}",
            "coefficients that can hold together (a positive semi-definite matrix)",
        )
        for c in wheres
    ]
