/** One part of blanking: the count that it should have, the counts that it may have, and how stiff it is. */
export type Share = {
  readonly aim: number;
  readonly min: number;
  readonly max: number;
  /** A part of twice the stiffness takes half as much of what is too much or too little. */
  readonly stiffness: number;
};

/** Whole counts in the order of the shares, with what they cost. */
export type Allocation = { readonly counts: readonly number[]; readonly cost: number };

function costOf(share: Share, count: number): number {
  return (share.stiffness * (count - share.aim) ** 2) / share.aim;
}

/** Counts (not whole) that share `total` in proportion to aim and inverse stiffness, within their bounds. */
function continuousCounts(shares: readonly Share[], total: number): number[] {
  const counts = shares.map(({ aim }) => aim);
  const fixed = new Set<number>();
  // Each round fixes one share at a bound at least, so there are at most as many rounds as shares.
  for (let round = 0; round <= shares.length; round += 1) {
    const free = shares.map((share, index) => ({ share, index })).filter(({ index }) => !fixed.has(index));
    const held = [...fixed].reduce((sum, index) => sum + (counts[index] ?? 0), 0);
    const give = free.reduce((sum, { share }) => sum + share.aim / share.stiffness, 0);
    const rest = total - held - free.reduce((sum, { share }) => sum + share.aim, 0);
    let worst = { index: -1, by: 1e-9 };
    for (const { share, index } of free) {
      const count = share.aim + (rest * share.aim) / share.stiffness / give;
      counts[index] = Math.min(Math.max(count, share.min), share.max);
      const by = Math.abs(count - (counts[index] ?? count));
      if (by > worst.by) worst = { index, by };
    }
    if (worst.index < 0) break;
    fixed.add(worst.index);
  }
  return counts;
}

/**
 * Splits `total` into whole counts within the shares' bounds, at least cost: the sum of
 * stiffness · (count − aim)² / aim.
 *
 * Exact: the cost is convex and separable, so adding one count after another where it costs least ends at the best
 * split, and the best split lies within (number of shares) of the best one that is not whole; so few steps are left.
 * @returns undefined where the bounds cannot hold the total
 */
export function allocate(shares: readonly Share[], total: number): Allocation | undefined {
  const least = shares.reduce((sum, { min }) => sum + min, 0);
  const most = shares.reduce((sum, { max }) => sum + max, 0);
  if (total < least || total > most || shares.some(({ min, max }) => min > max)) return undefined;
  const start = continuousCounts(shares, total);
  const slack = shares.length + 1;
  const counts = shares.map(({ min }, index) => Math.max(min, Math.floor(start[index] ?? min) - slack));
  let left = total - counts.reduce((sum, count) => sum + count, 0);
  while (left > 0) {
    let best = { index: -1, added: Infinity };
    shares.forEach((share, index) => {
      const count = counts[index] ?? 0;
      if (count >= share.max) return;
      const added = costOf(share, count + 1) - costOf(share, count);
      if (added < best.added) best = { index, added };
    });
    counts[best.index] = (counts[best.index] ?? 0) + 1;
    left -= 1;
  }
  return { counts, cost: shares.reduce((sum, share, index) => sum + costOf(share, counts[index] ?? 0), 0) };
}
