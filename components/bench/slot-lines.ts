import { compareDocuments } from "@/lib/profile/compare";
import { findMode } from "@/lib/profile/paths";
import type { ProfileDocument } from "@/lib/profile/document";
import type { DeviceLimits } from "@/lib/profile/limits";
import type { RasterTiming } from "@/lib/timing/raster";
import type { DeviceReading } from "@/components/bench/store/types";

/** One slot as the bench lists it. An empty slot has no name and no timing. */
export type SlotLine = {
  readonly number: number;
  readonly name: string;
  readonly timing: RasterTiming | null;
  readonly active: boolean;
  /** It, or the mode that it uses, differs from the last backup. */
  readonly changed: boolean;
};

function changedParts(now: ProfileDocument, before: ProfileDocument | null): ReadonlySet<string> {
  if (!before) return new Set();
  return new Set(compareDocuments(before, now).map((change) => /^(?:slots|modes)\[[^\]]*\]/u.exec(change.path)?.[0] ?? ""));
}

/** A line for every slot that the device has, in order. */
export function slotLines(reading: DeviceReading, device: DeviceLimits, lastBackup: ProfileDocument | null): SlotLine[] {
  const { document } = reading.content;
  const changed = changedParts(document, lastBackup);
  return Array.from({ length: device.slotCapacity }, (_, index) => {
    const number = device.firstSlot + index;
    const slot = document.slots?.find((one) => one.number === number);
    const timing = slot?.mode === undefined ? null : (findMode(document, slot.mode)?.timing ?? null);
    return {
      number, name: slot?.name ?? "", timing, active: reading.activeSlot === number,
      changed: changed.has(`slots[${number}]`) || (slot?.mode !== undefined && changed.has(`modes[${slot.mode}]`)),
    };
  });
}
