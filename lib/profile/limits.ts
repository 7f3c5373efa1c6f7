import type { RasterTiming } from "@/lib/timing/raster";
import type { SyncKind } from "@/lib/timing/envelope";
import type { LineFilter, OutputKind } from "./document";

/** Values are `min + n · step`, n whole; ties round up. */
export type NumberLimit = {
  readonly min: number;
  readonly max: number;
  readonly step: number;
  readonly unit?: string | undefined;
};

/** A stretch of formats and whether an input locks to them. Spans are inclusive; an absent one holds for all. */
export type AcceptedFormat = {
  readonly activeLines?: readonly [number, number] | undefined;
  readonly interlaced?: boolean | undefined;
  readonly fieldRateHz?: readonly [number, number] | undefined;
  readonly locks: "locks" | "does-not-lock" | "unknown";
};

/** A device as the checks know it: derived from a driver by `lib/serial`. */
export type DeviceLimits = {
  readonly name: string;
  /** By neutral path pattern (`slots[*].placement.offsetPx`, `modes[*].timing.horizontal.sync`). Absent = the device lacks it. */
  readonly numbers: Readonly<Record<string, NumberLimit>>;
  /** By neutral path pattern: the words the device has for it (`slots[*].syncKind` → ["separate"]). */
  readonly choices: Readonly<Record<string, readonly string[]>>;
  /** By neutral path pattern: texts the device holds (`slots[*].name`). `characters` lists every character it takes. */
  readonly texts: Readonly<Record<string, { readonly maxLength: number; readonly characters: string }>>;
  /** Slots are numbered from `firstSlot`. */
  readonly firstSlot: number;
  readonly slotCapacity: number;
  readonly firstMode: number;
  readonly modeCapacity: number;
  readonly clockHz: NumberLimit;
  /** Horizontal figures are multiples of this; 1 where any whole number will do. */
  readonly horizontalMultiple: number;
  readonly maxLineTotal?: number | undefined;
  readonly maxFieldLines?: number | undefined;
  readonly interlace: boolean;
  readonly inputs: readonly {
    readonly name: string;
    readonly label: string;
    readonly accepts: readonly AcceptedFormat[];
  }[];
  readonly outputKinds: readonly OutputKind[];
  /** Open-circuit level and source impedance of each sync output. */
  readonly syncOutputs: readonly {
    readonly kind: SyncKind;
    readonly vpp?: number | undefined;
    readonly sourceOhm?: number | undefined;
  }[];
  readonly outsideRaster: "refuses" | "cuts";
  readonly outputClock: "free" | "input";
  readonly lineFilter?: LineFilter | undefined;
  /** Rasters the device puts out on its own. */
  readonly idle: {
    readonly switchOn: RasterTiming | "unknown";
    readonly withoutInput: RasterTiming | "unknown";
    readonly afterReset: RasterTiming | "unknown";
  };
  /** Firmware versions that the driver was made for, inclusive, and the one that runs where it is known. */
  readonly firmware: { readonly min: string; readonly max: string; readonly running?: string | undefined };
};
