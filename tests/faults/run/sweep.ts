import type { Fault } from "./fault-line";
import { explore, type Case } from "./explore";

/** More points than a run has: a sweep that gets here does not end by itself. */
const MAX_POINTS = 2_000;

export type Found = { readonly cases: number; readonly broken: readonly string[]; readonly ends: Readonly<Record<string, number>> };

/** One case by a name that repeats it. */
function named(faults: readonly Fault[]): string {
  return faults.map(({ kind, at }) => `${kind} at ${at}`).join(", ");
}

/** Lives through each list of faults and gathers what broke. */
export async function exploreAll(over: Omit<Case, "faults">, lists: Iterable<readonly Fault[]>): Promise<Found> {
  const broken: string[] = [];
  const ends: Record<string, number> = {};
  let cases = 0;
  for (const faults of lists) {
    const { end, broken: found } = await explore({ ...over, faults });
    cases += 1;
    ends[end] = (ends[end] ?? 0) + 1;
    broken.push(...found.map((sentence) => `${sentence}: ${named(faults)}`));
  }
  return { cases, broken, ends };
}

/** Injects one fault at the n-th request, n = 0, 1, 2 …, until nothing strikes any more. */
export async function sweep(over: Omit<Case, "faults">, kind: Fault["kind"]): Promise<Found> {
  const broken: string[] = [];
  const ends: Record<string, number> = {};
  for (let at = 0; at < MAX_POINTS; at += 1) {
    const faults = [{ at, kind }];
    const { fired, end, broken: found } = await explore({ ...over, faults });
    if (fired === 0) return { cases: at, broken, ends };
    ends[end] = (ends[end] ?? 0) + 1;
    broken.push(...found.map((sentence) => `${sentence}: ${named(faults)}`));
  }
  throw new Error("The sweep did not end");
}
