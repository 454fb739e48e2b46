"""Complete-linkage groups: nearest first, every pair of a group within the limit."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

Distances = npt.NDArray[np.float32]


def complete_linkage(distance_k: Distances) -> list[list[int]]:
    """Groups of items that are merged nearest first, as long as all pairs may be together.

    Parameters
    ----------
    distance_k : array of shape (n, n)
        Symmetric distances, infinite where a pair must not share a group. Overwritten. [K]

    Returns
    -------
    list of lists
        The items' numbers, each in one group; no unit.

    Notes
    -----
    The nearest-neighbour chain (Benzécri 1982; Juan 1982): follow nearest neighbours until two are each other's
    nearest, merge them, go on from where the chain then ends. For complete linkage the groups are those of
    merging the nearest pair of all each time, in n² steps. Of equal distances the first counts.

    Examples
    --------
    >>> line = np.array([0.0, 0.3, 0.4, 0.9], dtype=np.float32)
    >>> apart = np.abs(line[:, None] - line)
    >>> complete_linkage(np.where(apart <= 0.5, apart, np.inf).astype(np.float32))
    [[0, 1, 2], [3]]
    """
    np.fill_diagonal(distance_k, np.inf)
    groups: dict[int, list[int]] = {item: [item] for item in range(len(distance_k))}
    done: list[list[int]] = []
    chain: list[int] = []
    while groups:
        if not chain:
            chain.append(next(iter(groups)))
        last, before = chain[-1], chain[-2] if len(chain) > 1 else None
        nearest = int(distance_k[last].argmin())
        if distance_k[last, nearest] == np.inf:
            done.append(groups.pop(chain.pop()))
        elif before is not None and distance_k[last, before] <= distance_k[last, nearest]:
            del chain[-2:]
            _merge(distance_k, before, last)
            groups[before] += groups.pop(last)
        else:
            chain.append(nearest)
    return sorted(sorted(group) for group in done)


def _merge(distance_k: Distances, kept: int, gone: int) -> None:
    """Complete linkage: a merged group is as far from another as the farther of the two was."""
    np.maximum(distance_k[kept], distance_k[gone], out=distance_k[kept])
    distance_k[kept, [kept, gone]] = np.inf
    distance_k[:, kept] = distance_k[kept]
    distance_k[gone] = np.inf
    distance_k[:, gone] = np.inf
