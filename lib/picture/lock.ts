import type { ScreenEnvelope, SyncKind } from "@/lib/timing/envelope";
import { judgeEnvelope, type RasterRule } from "@/lib/timing/judge-envelope";
import { rasterProblems } from "@/lib/timing/raster-problems";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";

/** What keeps a screen from locking. `no-raster`: nothing comes in, or what comes is no raster. */
export type LockTrouble = RasterRule | "no-raster" | "no-sync" | "sync-kind";

/** Whether a screen locks, and at which rates it scans on its own where it does not. */
export type Lock = {
  readonly locked: boolean;
  readonly why: readonly LockTrouble[];
  /** Where the screen holds on when the signal is out of its reach: its nearest rates. */
  readonly ownLineRateHz: number;
  readonly ownFieldRateHz: number;
};

/** A clock beyond the screen's blurs the picture, and short blanking shades it: it locks all the same. */
const losesLock: ReadonlySet<RasterRule> = new Set<RasterRule>(["line-rate", "field-rate", "interlace", "sync"]);

/** Rates of a screen that gets nothing: never drawn, but never a division by zero either. Source: ITU-R BT.470-5, 525/60. */
const IDLE = { ownLineRateHz: 4_500_000 / 286, ownFieldRateHz: 60_000 / 1001 };

/**
 * Whether a screen locks to a raster, as far as its envelope says: what it does not name does not keep it from locking.
 *
 * A simulation, not a promise: a real set may hold on beyond its limits, or let go within them.
 */
export function lockOf(
  mode: RasterTiming | null,
  screen: ScreenEnvelope | undefined,
  syncKind: SyncKind | undefined,
): Lock {
  if (!mode || rasterProblems(mode).length > 0) return { locked: false, why: ["no-raster"], ...IDLE };
  const rates = { ownLineRateHz: lineRateHz(mode), ownFieldRateHz: fieldRateHz(mode) };
  if (mode.horizontal.sync === 0 || mode.vertical.sync === 0) return { locked: false, why: ["no-sync"], ...rates };
  if (!screen) return { locked: true, why: [], ...rates };
  const broken = judgeEnvelope(mode, screen).filter(
    ({ outcome, rule }) => outcome === "outside" && losesLock.has(rule),
  );
  const nearest = (rule: RasterRule) => broken.find((verdict) => verdict.rule === rule)?.nearest;
  const kind: LockTrouble[] =
    syncKind !== undefined && screen.syncKinds?.includes(syncKind) === false ? ["sync-kind"] : [];
  const why = [...broken.map(({ rule }): LockTrouble => rule), ...kind];
  return {
    locked: why.length === 0,
    why,
    ownLineRateHz: nearest("line-rate") ?? rates.ownLineRateHz,
    ownFieldRateHz: nearest("field-rate") ?? rates.ownFieldRateHz,
  };
}
