"use client";

import { useQueries } from "@tanstack/react-query";
import { backupQuery, useDevices } from "@/components/backups/use-backups";
import type { KnownMode } from "@/components/screens/known-modes";
import { fitOf } from "@/components/screens/fit-words";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { modeName } from "@/lib/timing/mode-name";
import { rasterProblems } from "@/lib/timing/raster-problems";

/** Modes that the slots of a device have in its last backup; null while it is being read, or where there is no backup. */
export type DeviceModes = {
  readonly deviceId: string;
  readonly deviceName: string;
  readonly modes: readonly KnownMode[] | null;
  readonly state: "read" | "reading" | "no-backup" | "failed";
};

/** Stands where the modes are those that an EDID lists. */
export const EDID_GROUP = "edid";

/** Devices whose backups are read for one screen; more than that stand before no screen. */
const MOST_DEVICES = 8;

/** The modes in the slots of the devices that stand before a screen, from the last backup of each. */
export function useDeviceModes(
  devices: readonly { readonly id: string; readonly name: string }[],
): readonly DeviceModes[] {
  const known = useDevices(devices.length > 0);
  const wanted = devices.slice(0, MOST_DEVICES).map((device) => ({
    ...device,
    backupId: known.data?.find(({ id }) => id === device.id)?.lastBackup?.id ?? null,
  }));
  // Two questions for nothing would be the same question, which TanStack Query complains of.
  const ids = wanted.flatMap(({ backupId }) => backupId ?? []);
  const backups = useQueries({ queries: ids.map((id) => backupQuery(id)) });
  return wanted.map(({ id, name, backupId }): DeviceModes => {
    const backup = backupId === null ? undefined : backups[ids.indexOf(backupId)];
    const base = { deviceId: id, deviceName: name };
    if (known.isPending) return { ...base, modes: null, state: "reading" };
    if (known.isError || backup?.isError === true) return { ...base, modes: null, state: "failed" };
    if (backupId === null) return { ...base, modes: null, state: "no-backup" };
    const document = backup?.data?.content.document;
    if (document === undefined) return { ...base, modes: null, state: "reading" };
    // A device holds many modes that no slot has: they never reach the screen.
    const used = new Set((document.slots ?? []).flatMap(({ mode }) => mode ?? []));
    const modes = (document.modes ?? []).flatMap(({ key, name: ownName, timing }) =>
      !used.has(key) || timing === undefined || rasterProblems(timing).length > 0
        ? []
        : [{ id: `${id} ${key}`, name: ownName ?? modeName(timing), timing }],
    );
    return { ...base, modes, state: "read" };
  });
}

/** How many of a device's modes a screen takes: "3 of 4 fit". */
export function fitCount(modes: readonly KnownMode[], envelope: ScreenEnvelope): string {
  const fitting = modes.filter(({ timing }) => fitOf(timing, envelope).fits).length;
  return `${fitting} of ${modes.length} ${modes.length === 1 ? "fits" : "fit"}`;
}
