import type { Finding } from "@/lib/profile/finding";
import type { DeviceLimits, NumberLimit } from "@/lib/profile/limits";
import type { ProfileDocument } from "@/lib/profile/document";
import { compareDocuments } from "@/lib/profile/compare";
import { neutralSetting } from "@/lib/profile/neutral-settings";
import { numberLimit } from "@/lib/profile/round";
import { findMode, modePath, parsePath, patternOf } from "@/lib/profile/paths";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import type { PlanChange, Planned } from "@/lib/serial/plan/types";
import { nativeChanges, shownRange, shownValue } from "@/components/bench/native-rows";
import type { BenchDevice } from "@/components/bench/store/types";
import { findingsAt } from "@/components/bench/setting-rows";

/** One line of a plan under review. `timing` rows stand for a whole raster. */
export type ReviewRow = {
  readonly path: string;
  readonly label: string;
  readonly unit: string;
  readonly now: unknown;
  readonly planned: unknown;
  readonly isTiming: boolean;
  readonly range?: NumberLimit | undefined;
  readonly findings: readonly Finding[];
};

export type ReviewGroup =
  | { readonly kind: "slot"; readonly number: number; readonly name: string; readonly rows: readonly ReviewRow[] }
  | { readonly kind: "mode"; readonly key: string; readonly usedBy: readonly number[]; readonly rows: readonly ReviewRow[] }
  | { readonly kind: "everywhere"; readonly rows: readonly ReviewRow[] };

const TIMING = /^(modes\[.*\]\.timing)(?:\.|$)/u;

function rowOf(path: string, before: unknown, after: unknown, unit: string, device: DeviceLimits, findings: readonly Finding[]): ReviewRow {
  const pattern = patternOf(path) ?? path;
  const setting = neutralSetting(pattern);
  return {
    path, label: setting?.label ?? path, unit: setting?.unit ?? unit, now: before, planned: after,
    isTiming: false, range: numberLimit(device, pattern), findings: findingsAt(findings, path),
  };
}

/** Changes of the parts of one raster become one row: a timing is whole or absent. */
function timingRow(key: string, base: ProfileDocument, merged: ProfileDocument, findings: readonly Finding[]): ReviewRow {
  const path = modePath(key, "timing");
  return {
    path, label: "Raster", unit: "", isTiming: true, findings: findings.filter((finding) => finding.path.startsWith(modePath(key))),
    now: findMode(base, key)?.timing, planned: findMode(merged, key)?.timing,
  };
}

function rowsOf(base: ProfileDocument, merged: ProfileDocument, device: DeviceLimits, findings: readonly Finding[]): ReviewRow[] {
  const timings = new Set<string>();
  return compareDocuments(base, merged).flatMap((change) => {
    const parsed = parsePath(change.path);
    if (!parsed || (parsed.scope === "document" && parsed.fields[0] !== "everywhere") || parsed.fields[0] === "expects") return [];
    if (parsed.scope === "mode" && TIMING.test(change.path)) {
      if (timings.has(parsed.key)) return [];
      timings.add(parsed.key);
      return [timingRow(parsed.key, base, merged, findings)];
    }
    return [rowOf(change.path, change.left, change.right, change.unit, device, findings)];
  });
}

/** A change that no document has a word for, in the device's own figures. */
function nativeRowsOf(changes: readonly PlanChange[], driver: DriverDefinition, findings: readonly Finding[]): ReviewRow[] {
  return nativeChanges(changes, driver).map(({ key, was, planned, setting }) => ({
    path: key, label: setting.label, unit: shownRange(setting)?.unit ?? "", isTiming: false, range: shownRange(setting),
    now: shownValue(setting, was), planned: shownValue(setting, planned), findings: findingsAt(findings, key),
  }));
}

/**
 * What a plan changes, as the page lists it: by slot, then by mode, then what acts everywhere.
 *
 * @param base the document of the backup that the plan rests on
 * @param planned the document as it would be on the device, overlaid and rounded, and the changes that lead there
 */
export function reviewGroups(base: ProfileDocument, { merged, changes, findings }: Pick<Planned, "merged" | "changes" | "findings">, { limits, driver }: Pick<BenchDevice, "limits" | "driver">): ReviewGroup[] {
  const slots = new Map<number, ReviewRow[]>();
  const modes = new Map<string, ReviewRow[]>();
  const everywhere: ReviewRow[] = [];
  const into = <K>(map: Map<K, ReviewRow[]>, key: K, row: ReviewRow) => map.set(key, [...(map.get(key) ?? []), row]);
  for (const row of [...rowsOf(base, merged, limits, findings), ...nativeRowsOf(changes, driver, findings)]) {
    const parsed = parsePath(row.path);
    if (parsed?.scope === "slot") into(slots, parsed.number, row);
    else if (parsed?.scope === "mode") into(modes, parsed.key, row);
    else everywhere.push(row);
  }
  const nameOf = (number: number) => merged.slots?.find((slot) => slot.number === number)?.name ?? "";
  const usedBy = (key: string) => (merged.slots ?? []).filter((slot) => slot.mode === key).map((slot) => slot.number);
  return [
    ...[...slots].sort(([a], [b]) => a - b).map(([number, rows]): ReviewGroup => ({ kind: "slot", number, name: nameOf(number), rows })),
    ...[...modes].map(([key, rows]): ReviewGroup => ({ kind: "mode", key, usedBy: usedBy(key), rows })),
    ...(everywhere.length > 0 ? [{ kind: "everywhere" as const, rows: everywhere }] : []),
  ];
}
