/** Puts things into clusters by how alike each two of them are. */

/** The most alike cluster with a higher number, and how alike on average. */
interface Nearest {
  readonly j: number;
  readonly value: number;
}

/**
 * Agglomerative clustering with average linkage (the unweighted pair-group method of Sokal and Michener 1958): the two
 * clusters that are most alike on average over all pairs become one, as long as that average is at least `least`. Ties
 * go to the pair that comes first.
 *
 * @param alike of each two of `count` things, 0 to 1; asked once for each pair, the lower number first
 * @param least above 0
 * @returns members of each cluster, rising, clusters by their first member; those of one member as well
 */
export function averageLinkage(
  count: number,
  alike: (i: number, j: number) => number,
  least: number,
): number[][] {
  // Averages between clusters; a cluster is called after its first member. Pairs that have nothing in common are left out.
  const averages: Map<number, number>[] = Array.from({ length: count }, () => new Map());
  for (let i = 0; i < count; i++) {
    for (let j = i + 1; j < count; j++) {
      const value = alike(i, j);
      if (value <= 0) continue;
      averages[i]!.set(j, value);
      averages[j]!.set(i, value);
    }
  }
  const clusters = new Map<number, number[]>(Array.from({ length: count }, (_, i) => [i, [i]]));
  const nearestOf = (i: number): Nearest | null => {
    let best: Nearest | null = null;
    for (const [j, value] of averages[i]!) {
      if (j < i || value < least) continue;
      if (best === null || value > best.value || (value === best.value && j < best.j)) best = { j, value };
    }
    return best;
  };
  const nearest = averages.map((_, i) => nearestOf(i));
  for (;;) {
    let first = -1;
    for (const i of clusters.keys()) {
      if (nearest[i] !== null && (first < 0 || nearest[i]!.value > nearest[first]!.value)) first = i;
    }
    if (first < 0) return [...clusters.values()];
    const i = first;
    const { j } = nearest[i]!;
    const a = clusters.get(i)!;
    const b = clusters.get(j)!;
    const touched = new Set([...averages[i]!.keys(), ...averages[j]!.keys()]);
    touched.delete(i);
    touched.delete(j);
    for (const k of touched) {
      const sum = a.length * (averages[i]!.get(k) ?? 0) + b.length * (averages[j]!.get(k) ?? 0);
      const value = sum / (a.length + b.length);
      averages[i]!.set(k, value);
      averages[k]!.set(i, value);
      averages[k]!.delete(j);
    }
    averages[i]!.delete(j);
    averages[j]!.clear();
    clusters.set(
      i,
      [...a, ...b].sort((one, other) => one - other),
    );
    clusters.delete(j);
    // Only those that had i or j nearest, or may have now, need another look.
    nearest[i] = nearestOf(i);
    for (const k of touched) if (k < j) nearest[k] = nearestOf(k);
  }
}
