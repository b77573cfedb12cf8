/** Puts things into clusters by how alike each two of them are. */

/**
 * Agglomerative clustering with average linkage (the unweighted pair-group method of Sokal and Michener 1958): the two
 * clusters that are most alike on average over all pairs become one, as long as that average is at least `least`. Ties
 * go to the pair that comes first.
 *
 * @param alike of each two of `count` things, 0 to 1; asked once for each pair
 * @returns members of each cluster, rising, clusters by their first member; those of one member as well
 */
export function averageLinkage(
  count: number,
  alike: (i: number, j: number) => number,
  least: number,
): number[][] {
  // Clusters that no chain of alike pairs connects have average 0 and never meet: each component is done on its own.
  const values: Map<number, number>[] = Array.from({ length: count }, () => new Map());
  for (let i = 0; i < count; i++) {
    for (let j = i + 1; j < count; j++) {
      const value = alike(i, j);
      if (value <= 0) continue;
      values[i]!.set(j, value);
      values[j]!.set(i, value);
    }
  }
  const clusters = new Map<number, number[]>(Array.from({ length: count }, (_, i) => [i, [i]]));
  for (;;) {
    let best: { readonly i: number; readonly j: number; readonly value: number } | null = null;
    for (const i of clusters.keys()) {
      for (const [j, value] of values[i]!) {
        if (j > i && value >= least && (best === null || value > best.value)) best = { i, j, value };
      }
    }
    if (best === null) break;
    const { i, j } = best;
    const a = clusters.get(i)!;
    const b = clusters.get(j)!;
    for (const k of new Set([...values[i]!.keys(), ...values[j]!.keys()])) {
      if (k === i || k === j) continue;
      const sum = a.length * (values[i]!.get(k) ?? 0) + b.length * (values[j]!.get(k) ?? 0);
      values[i]!.set(k, sum / (a.length + b.length));
      values[k]!.set(i, sum / (a.length + b.length));
      values[k]!.delete(j);
    }
    values[i]!.delete(j);
    values[j]!.clear();
    clusters.set(
      i,
      [...a, ...b].sort((one, other) => one - other),
    );
    clusters.delete(j);
  }
  return [...clusters.values()];
}
