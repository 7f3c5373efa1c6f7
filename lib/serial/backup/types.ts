import type { ProfileDocument } from "@/lib/profile/document";
import type { RasterTiming, SourceFormat } from "@/lib/timing/raster";
import type { NativeKey, NativeValues } from "@/lib/serial/native";
import type { DeviceIdentity } from "@/lib/serial/session/types";

/** Everything a device said at one time: native values, restorable without loss, and the neutral document made from them. */
export type BackupContent = {
  readonly driver: { readonly slug: string; readonly version: string };
  readonly values: NativeValues;
  readonly unreadable: readonly NativeKey[];
  readonly document: ProfileDocument;
};

/** A backup as taken from a session: its content, and what was seen beside it. */
export type TakenBackup = {
  readonly content: BackupContent;
  readonly identity: DeviceIdentity;
  readonly activeSlot: number;
  readonly arriving: SourceFormat | null;
  /** Where the driver can read it, else what the active slot's mode gives. Null: nothing is put out. */
  readonly rasterOut: RasterTiming | null;
};
