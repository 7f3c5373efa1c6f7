import { rasterProblems } from "@/lib/timing/raster-problems";
import { placeInField, trimSource, cutOff } from "@/lib/picture/effective-picture";
import type { Finding } from "@/lib/profile/finding";
import { neutralSetting } from "@/lib/profile/neutral-settings";
import { modePath, slotPath } from "@/lib/profile/paths";
import { isSoundSource, type CheckContext, type JudgedSlot } from "./context";
import { duplicateFindings } from "./duplicates";
import { leaveOut, leaveOutAll, setValue, otherModeRemedies } from "./remedies";

function missingModes(context: CheckContext): Finding[] {
  const keys = new Set(context.modes.map((mode) => mode.key));
  return context.slots.flatMap(({ number, slot }) => {
    if (slot.mode === undefined || keys.has(slot.mode)) return [];
    return [
      {
        rule: "shape.mode-missing",
        path: slotPath(number, "mode"),
        severity: "stop",
        measured: slot.mode,
        sentence: `Slot ${number} names mode “${slot.mode}”, which the document does not have.`,
        slots: [number],
        remedies: [...otherModeRemedies(context, [number], undefined), leaveOut(number)],
      },
    ];
  });
}

function badTimings(context: CheckContext): Finding[] {
  return context.modes.flatMap(({ key, mode, changedUsers, users }) => {
    if (!mode.timing) return [];
    const judged = context.modes.find((other) => other.key === key);
    return rasterProblems(mode.timing).map((problem): Finding => {
      const label = neutralSetting(`modes[*].timing.${problem.path}`)?.label ?? problem.path;
      return {
        rule: "shape.timing",
        path: modePath(key, `timing.${problem.path}`),
        severity: "stop",
        sentence: `Mode ${key} is no raster.`,
        detail: `${label}: ${problem.message.charAt(0).toLowerCase()}${problem.message.slice(1)}`,
        slots: users,
        remedies: [...otherModeRemedies(context, changedUsers, judged), ...leaveOutAll(changedUsers)],
      };
    });
  });
}

function badSources(context: CheckContext): Finding[] {
  return context.slots.flatMap(({ number, slot }) => {
    if (!slot.expects || isSoundSource(slot.expects)) return [];
    return [
      {
        rule: "shape.source",
        path: slotPath(number, "expects"),
        severity: "stop",
        sentence: `Slot ${number} expects a source that cannot be.`,
        detail: "Its px and lines are whole numbers above 0, its field rate a number of Hz above 0.",
        slots: [number],
        remedies: [leaveOut(number)],
      },
    ];
  });
}

/** Trim reaches every slot; one finding for all whose source it takes whole. */
function nothingLeft(context: CheckContext): Finding[] {
  const trim = context.document.everywhere?.trim;
  if (!trim) return [];
  const empty = context.slots.filter(({ source }) => source && trimSource(source, trim) === null);
  if (empty.length === 0) return [];
  const slots = empty.map(({ number }) => number);
  const named = Object.entries(trim).filter(([, value]) => typeof value === "number" && value !== 0);
  return [
    {
      rule: "shape.nothing-left",
      path: "everywhere.trim",
      severity: "stop",
      sentence: `Trim leaves nothing of the picture in ${slots.length === 1 ? "slot" : "slots"} ${slots.join(", ")}.`,
      detail: "Left and right together, or top and bottom together, take more than comes in.",
      slots,
      remedies: [
        {
          kind: "set",
          label: "Use no trim",
          patch: named.map(([name]) => ({ path: `everywhere.trim.${name}`, value: 0 })),
        },
      ],
    },
  ];
}

/** No part of the slot's picture lies in its mode's raster. */
export function isOutside(slot: JudgedSlot): boolean {
  if (!slot.timing || !slot.slot.placement) return false;
  const { across, down } = placeInField(slot.timing, slot.slot.placement);
  return [
    { active: slot.timing.horizontal.active, extent: across },
    { active: slot.timing.vertical.active, extent: down },
  ].some(({ active, extent }) => {
    const cut = cutOff(active, extent);
    // Turned round: a size beyond all numbers leaves no number, and nothing inside.
    return !(extent.size - cut.before - cut.after > 0);
  });
}

function nothingInside(context: CheckContext): Finding[] {
  return context.slots.filter(isOutside).map(({ number, slot }) => {
    const sizeless = (slot.placement?.widthPct ?? 100) <= 0 || (slot.placement?.heightPct ?? 100) <= 0;
    const centre = ["offsetPx", "offsetLines"].map((name) => ({
      path: slotPath(number, `placement.${name}`),
      value: 0,
    }));
    return {
      rule: "shape.nothing-inside",
      path: slotPath(number, "placement"),
      severity: "stop",
      sentence: `No part of slot ${number}'s picture lies in the raster.`,
      detail: sizeless ? "Its size is 0." : "Its position is beyond the edge of the mode.",
      slots: [number],
      remedies: [
        ...(sizeless
          ? [setValue("Use 100.0 %", slotPath(number, "placement.heightPct"), 100)].filter(
              () => (slot.placement?.widthPct ?? 100) > 0,
            )
          : [{ kind: "set" as const, label: "Use the centre", patch: centre }]),
        leaveOut(number),
      ],
    };
  });
}

/** `shape`: what is no document of rasters and pictures at all. Always a stop. */
export function shapeFindings(context: CheckContext): Finding[] {
  return [
    ...duplicateFindings(context.document),
    ...missingModes(context),
    ...badTimings(context),
    ...badSources(context),
    ...nothingLeft(context),
    ...nothingInside(context),
  ];
}
