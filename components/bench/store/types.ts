import type { DocumentPatch, Finding } from "@/lib/profile/finding";
import type { DeviceLimits } from "@/lib/profile/limits";
import type { ProfileDocument } from "@/lib/profile/document";
import type { RasterTiming } from "@/lib/timing/raster";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import type { BackupContent } from "@/lib/serial/backup/types";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { NativeWrite } from "@/lib/serial/native";
import type { Planned } from "@/lib/serial/plan/types";
import type { Arriving, DeviceIdentity, ReadProgress } from "@/lib/serial/session/types";
import type { JournalEntry, RunView } from "@/lib/serial/run/types";
import type { FaultChoice } from "@/components/bench/fault-choices";
import type { PortFailure } from "@/components/bench/port-help";

/** A connection as a closed union of states. */
export type LinkState =
  | { readonly name: "none" }
  | { readonly name: "opening" }
  | { readonly name: "identifying" }
  | { readonly name: "ready" }
  | { readonly name: "failed"; readonly failure: PortFailure }
  | { readonly name: "lost"; readonly cause: string };

/** What the bench is doing with the line, one thing at a time. */
export type Activity = "idle" | "reading" | "backing-up" | "recalling" | "running";

export type BenchDevice = {
  readonly kind: "simulated" | "real";
  readonly driver: DriverDefinition;
  readonly limits: DeviceLimits;
  readonly identity: DeviceIdentity;
  /** The server's row, where somebody is signed in. */
  readonly stored: StoredDevice | null;
};

export type StoredDevice = { readonly id: string; readonly name: string; readonly screenId: string | null };

/** The last whole read, and the neutral document made from it. */
export type DeviceReading = {
  readonly content: BackupContent;
  readonly activeSlot: number;
  readonly rasterOut: RasterTiming | null;
  readonly arriving: Arriving | null;
  readonly atMs: number;
};

export type BenchBackup = {
  /** The server's row; null keeps the backup in this page (no account). */
  readonly id: string | null;
  readonly takenAt: number;
  readonly content: BackupContent;
  /** Values that differ from the backup before it; null for a first one. */
  readonly changedCount: number | null;
};

/** What the signal goes to. */
export type BenchScreen =
  | { readonly kind: "none" }
  | { readonly kind: "known"; readonly id: string | null; readonly envelope: ScreenEnvelope }
  | { readonly kind: "accepted-unknown" };

/** What a plan leads to. Patches are the remedies taken by a click. */
export type BenchTarget =
  | { readonly kind: "edits"; readonly patches: readonly DocumentPatch[]; readonly native: readonly NativeWrite[] }
  | {
      readonly kind: "profile"; readonly title: string; readonly revisionId: string | null; readonly revisionNumber: number | null;
      readonly document: ProfileDocument; readonly patches: readonly DocumentPatch[];
      /** The document took over a mode of the device, so it is no longer the revision and some patches. */
      readonly isAltered: boolean;
      /** The document is one raster for this slot, not a profile of anybody's. */
      readonly forSlot?: number;
    }
  | { readonly kind: "restore"; readonly title: string; readonly backupId: string | null; readonly content: BackupContent };

export type BenchReview = {
  readonly target: BenchTarget;
  readonly leftOut: readonly number[];
  readonly acknowledged: readonly string[];
  /** How long a trial waits for a Keep: 10 to 120 s. */
  readonly countdownSeconds: number;
  readonly planned: Planned;
};

/** A run as the page shows it, with what its plan says beside it. */
export type BenchRun = {
  readonly view: RunView;
  readonly journal: readonly JournalEntry[];
  readonly changeCount: number;
  readonly changedSlots: readonly number[];
  /** Every write is stored at once: there is no trial memory. */
  readonly storesAtOnce: boolean;
  /** What the last act could not do, and why. */
  readonly notice: string | null;
};

export type Notice = { readonly tone: "plain" | "halt" | "ok"; readonly text: string };

export type BenchState = {
  readonly link: LinkState;
  readonly activity: Activity;
  readonly device: BenchDevice | null;
  readonly reading: DeviceReading | null;
  readonly progress: ReadProgress | null;
  readonly backup: BenchBackup | null;
  readonly screen: BenchScreen;
  /** Changes made by hand on the rulers, not yet planned. */
  readonly edits: readonly DocumentPatch[];
  /** The same for settings that no document has a word for. */
  readonly nativeEdits: readonly NativeWrite[];
  readonly review: BenchReview | null;
  readonly run: BenchRun | null;
  /** What goes wrong with a simulated device, as a maintainer chose. */
  readonly faults: readonly FaultChoice[];
  /** A recall that a check holds back, or that asks first. */
  readonly heldRecall: { readonly slot: number; readonly findings: readonly Finding[] } | null;
  readonly notice: Notice | null;
  /** Wall clock, moved once a minute: what "2 min ago" is counted from. */
  readonly nowMs: number;
};
