import type { WireDirection } from "@/lib/serial/simulator/wire-fault";
import { BYTE_FAULTS, faultsOfKind, type ByteKind } from "./byte-faults";
import { caseId, type Case } from "./case-id";
import { explore, type Explored } from "./explore";
import type { Fault, FaultKind } from "./fault-line";

/**
 * `cover`: what every run of the tests lives through: each fault at every stride-th place, each kind beginning at another
 * one. `whole`: each fault at every place, all eight bits of a byte.
 */
export const SCOPE: "cover" | "whole" = process.env.SWEEP_SCOPE === "whole" ? "whole" : "cover";

/** More places than any scenario has: a sweep that gets here does not end by itself. */
const MAX_PLACES = 20_000;
/** Failures told in full; the others are counted. */
const MAX_TOLD = 20;

export type Swept = { readonly cases: number; readonly broken: readonly string[]; readonly ends: ReadonlySet<string> };

let lived = 0;

/** Cases that this file's sweeps have lived through so far. */
export const livedCases = (): number => lived;

/** Gathers what cases came to. Each broken one is told by the id that repeats it. */
export class Tally {
  cases = 0;
  readonly ends = new Set<string>();
  private readonly told: string[] = [];
  private more = 0;

  /** Lives one case. @returns how many of its troubles struck */
  async live(one: Case): Promise<number> {
    const { struck, end, broken } = await explored(one);
    if (struck > 0) {
      this.cases += 1;
      lived += 1;
      this.ends.add(end);
    }
    for (const sentence of broken) {
      if (this.told.length < MAX_TOLD) this.told.push(`${sentence} · SWEEP=${caseId(one)}`);
      else this.more += 1;
    }
    return struck;
  }

  get broken(): readonly string[] {
    return this.more === 0 ? this.told : [...this.told, `and ${this.more} more`];
  }
}

/** A case that throws has broken I1, or something that nobody thought of: its id must not be lost. */
export async function explored(one: Case): Promise<Explored> {
  try {
    return await explore(one);
  } catch (error) {
    return { struck: 1, end: "ready", broken: [`I1 ${error instanceof Error ? error.message : String(error)}`] };
  }
}

type Steps = { readonly stride: number; readonly phase: number };

/** Places of a sweep in the chosen scope. */
function* places({ stride, phase }: Steps): Generator<number> {
  const step = SCOPE === "whole" ? 1 : stride;
  for (let at = SCOPE === "whole" ? 0 : phase % stride; at < MAX_PLACES; at += step) yield at;
  throw new Error("The sweep did not end");
}

/** One fault at the n-th request, until nothing strikes any more. */
export async function sweepRequests(tally: Tally, over: Omit<Case, "faults">, kind: FaultKind, steps: Steps): Promise<void> {
  for (const at of places(steps)) {
    if ((await tally.live({ ...over, faults: [{ at, kind } satisfies Fault] })) === 0) return;
  }
}

/** One fault at the n-th byte of a direction, until nothing strikes any more. */
export async function sweepBytes(tally: Tally, over: Omit<Case, "bytes">, kind: ByteKind, direction: WireDirection, lasting: boolean, steps: Steps): Promise<void> {
  for (const at of places(steps)) {
    for (const fault of faultsOfKind(kind, at, SCOPE === "whole")) {
      if ((await tally.live({ ...over, bytes: [{ fault, direction, at, lasting }] })) === 0) return;
    }
  }
}

/** The directions in which a kind means something of its own: a port reads what comes in and writes what goes out. */
export function directionsOf(kind: ByteKind): readonly WireDirection[] {
  const fault = kind === "flip" || kind === "insert" ? null : BYTE_FAULTS[kind];
  if (fault?.kind === "read-error") return ["device-to-host"];
  if (fault?.kind === "write-error") return ["host-to-device"];
  return ["host-to-device", "device-to-host"];
}
