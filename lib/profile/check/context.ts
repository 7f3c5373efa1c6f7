import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import { rasterProblems } from "@/lib/timing/raster-problems";
import type { ProfileDocument, ProfileMode, ProfileSlot } from "@/lib/profile/document";
import type { DeviceLimits } from "@/lib/profile/limits";
import { roundDocument, type RoundedDocument } from "@/lib/profile/round";
import type { Unchanged } from "@/lib/profile/unchanged";

export type CheckInput = {
  readonly document: ProfileDocument;
  /** Slots and modes that stay as they are; absent: all is new. */
  readonly unchanged?: Unchanged | undefined;
  readonly device?: DeviceLimits | undefined;
  readonly screen?: ScreenEnvelope | undefined;
  /** What comes in; absent: what each slot expects. */
  readonly source?: SourceFormat | null | undefined;
};

export type JudgedMode = {
  readonly key: string;
  readonly mode: ProfileMode;
  /** Absent where the mode has none, or one that is no raster (`shape.timing` says so). */
  readonly timing?: RasterTiming | undefined;
  readonly users: readonly number[];
  readonly changedUsers: readonly number[];
};

export type JudgedSlot = {
  readonly number: number;
  readonly slot: ProfileSlot;
  readonly timing?: RasterTiming | undefined;
  readonly source?: SourceFormat | undefined;
};

/** What every rule sees: the document as the device would hold it, and what belongs together in it. */
export type CheckContext = {
  readonly document: ProfileDocument;
  readonly rounding: RoundedDocument | null;
  readonly device?: DeviceLimits | undefined;
  readonly screen?: ScreenEnvelope | undefined;
  readonly modes: readonly JudgedMode[];
  readonly slots: readonly JudgedSlot[];
  readonly unchangedSlots: ReadonlySet<number>;
  readonly unchangedModes: ReadonlySet<string>;
};

export function isSoundSource(source: SourceFormat): boolean {
  const counts = [source.activePx, source.activeLines];
  return (
    counts.every((count) => Number.isInteger(count) && count > 0) &&
    source.fieldRateHz > 0 &&
    Number.isFinite(source.fieldRateHz)
  );
}

function soundTiming(mode: ProfileMode | undefined): RasterTiming | undefined {
  return mode?.timing && rasterProblems(mode.timing).length === 0 ? mode.timing : undefined;
}

function judgedSlot(
  slot: ProfileSlot,
  modes: ReadonlyMap<string, ProfileMode>,
  given: SourceFormat | undefined,
): JudgedSlot {
  const source = given ?? slot.expects;
  return {
    number: slot.number,
    slot,
    timing: slot.mode === undefined ? undefined : soundTiming(modes.get(slot.mode)),
    source: source && isSoundSource(source) ? source : undefined,
  };
}

/** Rounds the document to the device and looks everything up once. */
export function checkContext(input: CheckInput): CheckContext {
  const rounding = input.device ? roundDocument(input.document, input.device) : null;
  const document = rounding?.document ?? input.document;
  const slots = document.slots ?? [];
  const modesByKey = new Map((document.modes ?? []).map((mode) => [mode.key, mode]));
  const unchangedSlots = new Set(input.unchanged?.slots);
  const modes = (document.modes ?? []).map((mode): JudgedMode => {
    const users = slots.filter((slot) => slot.mode === mode.key).map((slot) => slot.number);
    return {
      key: mode.key,
      mode,
      timing: soundTiming(mode),
      users,
      changedUsers: users.filter((number) => !unchangedSlots.has(number)),
    };
  });
  return {
    document,
    rounding,
    device: input.device,
    screen: input.screen,
    modes,
    slots: slots.map((slot) => judgedSlot(slot, modesByKey, input.source ?? undefined)),
    unchangedSlots,
    unchangedModes: new Set(input.unchanged?.modes),
  };
}
