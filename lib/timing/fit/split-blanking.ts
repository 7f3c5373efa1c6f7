import { allocate, type Share } from "@/lib/timing/fit/allocate";

export const blankingOrder = ["frontPorch", "sync", "backPorch"] as const;

/** Whole counts of the three parts of blanking. */
export type Blanking = Readonly<Record<(typeof blankingOrder)[number], number>>;

export type BlankingSplit = {
  readonly blanking: Blanking;
  readonly cost: number;
  /** No part stands at an end of what it may be: as the cost is convex, no other ends would give a cheaper split. */
  readonly unbound: boolean;
};

/** The sync is kept nearer to the standard's than the porches: sets are made for one sync and centred by porches. */
const SYNC_STIFFNESS = 8;

/** How stiff a part is: see `allocate`. */
export function stiffnessOf(part: (typeof blankingOrder)[number]): number {
  return part === "sync" ? SYNC_STIFFNESS : 1;
}

/** Splits `total` over the shares, which stand in `blankingOrder`; the cost is relative to the sum of the aims. */
export function splitBlanking(shares: readonly Share[], total: number): BlankingSplit | undefined {
  const allocation = allocate(shares, total);
  if (allocation === undefined) return undefined;
  const [frontPorch = 0, sync = 0, backPorch = 0] = allocation.counts;
  const weight = shares.reduce((sum, { aim }) => sum + aim, 0);
  const unbound = shares.every(({ min, max }, index) => {
    const count = allocation.counts[index] ?? 0;
    return count > min && count < max;
  });
  return { blanking: { frontPorch, sync, backPorch }, cost: allocation.cost / weight, unbound };
}
