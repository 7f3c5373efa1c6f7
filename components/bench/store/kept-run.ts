import { z } from "zod";
import { journalEntrySchema } from "@/lib/contracts/run";
import type { JournalEntry } from "@/lib/serial/run/types";
import type { DeviceIdentity } from "@/lib/serial/session/types";
import type { PlanInput } from "@/lib/serial/plan/types";

/** What browser storage keeps of the open run of a device: enough to take it up again without the server. */
export type KeptRun = {
  /** The server's row; null without an account. */
  readonly runId: string | null;
  readonly hash: string;
  readonly countdownSeconds: number;
  readonly identity: DeviceIdentity;
  /** The input of `planChanges`: the plan is made again from it, and the hash must be the same. */
  readonly input: PlanInput;
  readonly entries: readonly JournalEntry[];
};

const keptRunSchema = z.object({
  runId: z.string().nullable(), hash: z.string(), countdownSeconds: z.number(),
  identity: z.object({ maker: z.string(), model: z.string(), serialNumber: z.string().optional(), firmware: z.string() }),
  input: z.record(z.string(), z.unknown()),
  entries: z.array(journalEntrySchema),
});

/** The name under which a device's open run is kept: two devices of a model differ by serial number. */
export function keptRunKey(slug: string, serialNumber: string | undefined): string {
  return `backporch.run.${slug}.${serialNumber ?? "no-serial"}`;
}

/** The kept run of a device, or null. What can't be read is no run of this version: it is left where it is. */
export function loadKeptRun(storage: Storage, key: string): KeptRun | null {
  const text = storage.getItem(key);
  if (text === null) return null;
  const parsed = keptRunSchema.safeParse(parseJson(text));
  // `input` was written by `saveKeptRun`; the plan made from it must have the kept hash, or it is refused.
  return parsed.success ? { ...parsed.data, input: parsed.data.input as PlanInput } : null;
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch (error) {
    if (error instanceof SyntaxError) return null;
    throw error;
  }
}

/** Keeps a run. Throws where the storage is full or blocked. */
export function saveKeptRun(storage: Storage, key: string, run: KeptRun): void {
  storage.setItem(key, JSON.stringify(run));
}

/** A run that came to its end needs no keeping. */
export function dropKeptRun(storage: Storage, key: string): void {
  storage.removeItem(key);
}
