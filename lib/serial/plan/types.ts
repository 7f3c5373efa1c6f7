import type { Finding } from "@/lib/profile/finding";
import type { ProfileDocument } from "@/lib/profile/document";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import type { BackupContent } from "@/lib/serial/backup/types";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { NativeKey, NativeValue, NativeWrite } from "@/lib/serial/native";

/** One request of a plan that changes something, with the raster that is out after it (null: nothing). */
export type PlanStep =
  | { readonly kind: "write"; readonly writes: readonly NativeWrite[]; readonly was: readonly NativeWrite[]; readonly rasterAfter: RasterTiming | null }
  | { readonly kind: "recall"; readonly slot: number; readonly why: "take-effect" | "step-aside" | "return"; readonly rasterAfter: RasterTiming | null }
  | { readonly kind: "mute"; readonly on: boolean; readonly rasterAfter: RasterTiming | null };

/** One native value that changes. `neutralPath` is absent for native settings. */
export type PlanChange = {
  readonly key: NativeKey;
  readonly neutralPath?: string | undefined;
  readonly was: NativeValue;
  readonly planned: NativeValue;
};

/** 1 single writes in a safe order; 2 one block write or one recall; 3 another slot meanwhile; 4 a free mode; 5 muted. */
export type PlanWay = 1 | 2 | 3 | 4 | 5;

/** What a plan is made from; the hash covers all of it. */
export type PlanInput = {
  readonly backup: BackupContent;
  /** A profile (laid over the backup), or a restore of another backup's native values. */
  readonly target:
    | { readonly kind: "profile"; readonly document: ProfileDocument }
    | { readonly kind: "restore"; readonly content: BackupContent };
  readonly leftOut: readonly number[];
  readonly driver: DriverDefinition;
  /** `accepted-unknown`: the owner stated that the screen is unknown and accepts that. */
  readonly screen: ScreenEnvelope | "accepted-unknown";
  readonly source: SourceFormat | null;
  readonly activeSlot: number;
  /** The raster out at the start where the driver can read it; else it follows from the active slot's mode. */
  readonly rasterOut?: RasterTiming | null | undefined;
  /** `rule` + `path` of each caution that the owner acknowledged. */
  readonly acknowledged: readonly string[];
};

declare const checked: unique symbol;

/** Made by `planChanges` alone, after checking: the writer takes nothing else. */
export type CheckedPlan = {
  readonly [checked]: true;
  readonly hash: string;
  readonly way: PlanWay;
  readonly driver: { readonly slug: string; readonly version: string };
  readonly activeSlot: number;
  readonly steps: readonly PlanStep[];
  readonly changes: readonly PlanChange[];
  /** What the device holds when all is new: every changed key and, on recall devices, the raster out. */
  readonly changedSlots: readonly number[];
  /** Settings that cannot be read back: to be set on the device by hand. */
  readonly byHand: readonly { readonly key: NativeKey; readonly label: string; readonly value: NativeValue }[];
  /** Rasters allowed on the way, the one out at the start first. */
  readonly rasterBefore: RasterTiming | null;
  readonly rasterAfter: RasterTiming | null;
  /** Of the writes, read-backs and recalls, at the device's pace; whole reads come on top. */
  readonly bytes: number;
  readonly seconds: number;
  readonly wholeReadSeconds: number;
  readonly input: PlanInput;
};

/** A plan, or what keeps it from being one; findings and changes stand either way, for the page. */
export type Planned = {
  readonly findings: readonly Finding[];
  readonly changes: readonly PlanChange[];
  /** The document as it would be on the device: overlaid and rounded. */
  readonly merged: ProfileDocument;
  /** Values that the profile names and that match already. */
  readonly unchangedCount: number;
  /** Cautions still to acknowledge, as `rule` + " " + `path`. */
  readonly toAcknowledge: readonly string[];
  /** Absent on a stop, an unacknowledged caution, or when nothing changes. */
  readonly plan: CheckedPlan | null;
};
