import { fieldLines, lineTotal } from "@/lib/timing/rates";
import type { RasterTiming } from "@/lib/timing/raster";
import type { Finding } from "@/lib/profile/finding";
import type { DeviceLimits } from "@/lib/profile/limits";
import { modePath } from "@/lib/profile/paths";
import { withUnit } from "@/lib/profile/words";
import type { CheckContext, JudgedMode } from "./context";
import { leaveOutAll, setValue, otherModeRemedies } from "./remedies";

type Broken = {
  readonly rule: string;
  readonly field: string;
  readonly measured: number;
  readonly limit: number;
  readonly unit?: string;
  readonly sentence: string;
  /** A value that makes it pass. */
  readonly use?: number;
};

const parts = ["active", "frontPorch", "sync", "backPorch"] as const;
const partNames = { active: "active part", frontPorch: "front porch", sync: "sync", backPorch: "back porch" } as const;

function totals(key: string, timing: RasterTiming, device: DeviceLimits): Broken[] {
  const rows = [
    { measured: lineTotal(timing), limit: device.maxLineTotal, unit: "px", field: "horizontal", of: "a line" },
    { measured: fieldLines(timing), limit: device.maxFieldLines, unit: "lines", field: "vertical", of: "a field" },
  ];
  return rows.flatMap(({ measured, limit, unit, field, of }) => {
    if (limit === undefined || measured <= limit) return [];
    const sentence = `Mode ${key} has ${withUnit(measured, unit)} in ${of}, more than this device's ${withUnit(limit, unit)}.`;
    return [{ rule: "device.totals", field, measured, limit, unit, sentence }];
  });
}

function multiples(key: string, timing: RasterTiming, device: DeviceLimits): Broken[] {
  const multiple = device.horizontalMultiple;
  return parts.flatMap((part) => {
    const measured = timing.horizontal[part];
    if (measured % multiple === 0) return [];
    const sentence = `Mode ${key}'s horizontal ${partNames[part]} of ${withUnit(measured, "px")} is no multiple of ${multiple}.`;
    const use = Math.max(
      part === "active" || part === "sync" ? multiple : 0,
      Math.round(measured / multiple) * multiple,
    );
    return [
      { rule: "device.multiple", field: `horizontal.${part}`, measured, limit: multiple, unit: "px", sentence, use },
    ];
  });
}

function interlace(key: string, timing: RasterTiming, device: DeviceLimits): Broken[] {
  if (!timing.interlaced || device.interlace) return [];
  const sentence = `Mode ${key} is interlaced, and this device puts out progressive rasters alone.`;
  return [{ rule: "device.interlace", field: "interlaced", measured: 2, limit: 1, unit: "fields", sentence }];
}

function ofMode(context: CheckContext, mode: JudgedMode, device: DeviceLimits): Finding[] {
  const { key, timing } = mode;
  if (!timing) return [];
  const broken = [...totals(key, timing, device), ...multiples(key, timing, device), ...interlace(key, timing, device)];
  return broken.map(({ rule, field, measured, limit, unit, sentence, use }) => {
    const path = modePath(key, `timing.${field}`);
    return {
      rule,
      path,
      severity: "stop",
      measured,
      limit,
      unit,
      sentence,
      limitSource: "driver",
      slots: mode.users,
      remedies: [
        ...(use === undefined ? [] : [setValue(`Use ${withUnit(use, unit)}`, path, use)]),
        ...otherModeRemedies(context, mode.changedUsers, mode),
        ...leaveOutAll(mode.changedUsers),
      ],
    };
  });
}

/** `device` totals, multiples, interlace: rasters that it cannot make although every figure is in range. */
export function deviceRasterFindings(context: CheckContext): Finding[] {
  const { device } = context;
  return device ? context.modes.flatMap((mode) => ofMode(context, mode, device)) : [];
}
