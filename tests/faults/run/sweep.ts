import type { WireDirection } from "@/lib/serial/simulator/wire-fault";
import { BYTE_FAULTS, faultsOfKind, type ByteKind } from "./byte-faults";
import { caseId, type Case } from "./case-id";
import { explore, type Explored, type Reached } from "./explore";
import type { Fault, FaultKind } from "./fault-line";

/**
 * `cover`: what every run of the tests lives through: each fault at every stride-th place, each kind beginning at another
 * one. `whole`: each fault at every place, all eight bits of a byte.
 */
export const SCOPE: "cover" | "whole" = process.env.SWEEP_SCOPE === "whole" ? "whole" : "cover";

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

  /** Lives one case, whose trouble has to strike. */
  async live(one: Case): Promise<void> {
    const { struck, end, broken } = await explored(one);
    if (struck > 0) {
      this.cases += 1;
      lived += 1;
      this.ends.add(end);
    }
    for (const sentence of struck > 0 ? broken : [...broken, "nothing struck"]) {
      if (this.told.length < MAX_TOLD) this.told.push(`${sentence} · SWEEP=${caseId(one)}`);
      else this.more += 1;
    }
  }

  get broken(): readonly string[] {
    return this.more === 0 ? this.told : [...this.told, `and ${this.more} more`];
  }
}

const NOWHERE: Reached = { requests: 0, "host-to-device": 0, "device-to-host": 0 };

/** A case that throws has broken I1, or something that nobody thought of: its id must not be lost. */
export async function explored(one: Case): Promise<Explored> {
  try {
    return await explore(one);
  } catch (error) {
    return { struck: 1, end: "ready", broken: [`I1 ${error instanceof Error ? error.message : String(error)}`], reached: NOWHERE };
  }
}

type Steps = { readonly stride: number; readonly phase: number };

const reaches = new Map<string, Promise<Reached>>();

/**
 * How far a scenario goes where nothing strikes. Until a trouble strikes it goes just so with it: a trouble at any earlier
 * place strikes, and one behind the last place never does. Lived once for all the kinds that are swept over it.
 */
function reachOf(over: Omit<Case, "faults" | "bytes">): Promise<Reached> {
  const calm: Case = { ...over, faults: [], bytes: [] };
  const key = JSON.stringify(calm);
  const reach = reaches.get(key) ?? explored(calm).then(({ reached, broken }) => {
    if (broken.length > 0) throw new Error(`With no trouble at all: ${broken.join("; ")}`);
    return reached;
  });
  reaches.set(key, reach);
  return reach;
}

/** Places of a sweep in the chosen scope, before `end`. */
function* places({ stride, phase }: Steps, end: number): Generator<number> {
  const step = SCOPE === "whole" ? 1 : stride;
  for (let at = SCOPE === "whole" ? 0 : phase % stride; at < end; at += step) yield at;
}

/** One fault at the n-th request, to the last one. */
export async function sweepRequests(tally: Tally, over: Omit<Case, "faults">, kind: FaultKind, steps: Steps): Promise<void> {
  const { requests } = await reachOf(over);
  for (const at of places(steps, requests)) await tally.live({ ...over, faults: [{ at, kind } satisfies Fault] });
}

/** One fault at the n-th byte of a direction, to the last one. */
export async function sweepBytes(tally: Tally, over: Omit<Case, "bytes">, kind: ByteKind, direction: WireDirection, lasting: boolean, steps: Steps): Promise<void> {
  const { [direction]: end } = await reachOf(over);
  for (const at of places(steps, end)) {
    for (const fault of faultsOfKind(kind, at, SCOPE === "whole")) await tally.live({ ...over, bytes: [{ fault, direction, at, lasting }] });
  }
}

/** The directions in which a kind means something of its own: a port reads what comes in and writes what goes out. */
export function directionsOf(kind: ByteKind): readonly WireDirection[] {
  const fault = kind === "flip" || kind === "insert" ? null : BYTE_FAULTS[kind];
  if (fault?.kind === "read-error") return ["device-to-host"];
  if (fault?.kind === "write-error") return ["host-to-device"];
  return ["host-to-device", "device-to-host"];
}
