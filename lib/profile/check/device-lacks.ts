import type { Finding } from "@/lib/profile/finding";
import type { LackedValue } from "@/lib/profile/round";
import { hasSetting } from "@/lib/profile/round";
import { slotsText } from "@/lib/profile/words";
import type { CheckContext } from "./context";
import { slotsOf } from "./device-range";

function byPattern(lacks: readonly LackedValue[]): LackedValue[][] {
  const groups = new Map<string, LackedValue[]>();
  for (const lacked of lacks)
    groups.set(lacked.setting.pattern, [...(groups.get(lacked.setting.pattern) ?? []), lacked]);
  return [...groups.values()];
}

/** A name of an input that this device does not have: the slot keeps its own. */
function strangeInput({ path, value }: LackedValue, context: CheckContext): Finding {
  const slots = slotsOf(path, context);
  return {
    rule: "device.lacks",
    path,
    severity: "caution",
    measured: String(value),
    sentence: `This device has no input “${String(value)}”.`,
    detail: `Slot ${slots.join(", ")} keeps the input that it has.`,
    limitSource: "driver",
    slots,
    remedies: [{ kind: "set", label: "Keep the device's input", patch: [{ path, value: null }] }],
  };
}

function lackedSetting(group: readonly LackedValue[], context: CheckContext): Finding[] {
  const [first] = group;
  if (!first) return [];
  const slots = [...new Set(group.flatMap(({ path }) => slotsOf(path, context)))];
  const { setting } = first;
  return [
    {
      rule: "device.lacks",
      path: setting.pattern,
      severity: "caution",
      sentence: `This device has no setting for ${setting.label.charAt(0).toLowerCase()}${setting.label.slice(1)}.`,
      detail:
        slots.length === 0
          ? "The document names it; it is not written."
          : `The document names it for ${slotsText(slots)}; it is not written.`,
      limitSource: "driver",
      slots,
      remedies: [{ kind: "set", label: "Take it out", patch: group.map(({ path }) => ({ path, value: null })) }],
    },
  ];
}

/** `device` lacks: what the document names and this driver has no word for. One finding a setting. */
export function deviceLacksFindings(context: CheckContext): Finding[] {
  const { device, rounding } = context;
  if (!device || !rounding) return [];
  const isStrangeInput = ({ setting }: LackedValue) =>
    setting.pattern === "slots[*].input" && hasSetting(device, setting.pattern);
  return [
    ...rounding.lacks.filter(isStrangeInput).map((lacked) => strangeInput(lacked, context)),
    ...byPattern(rounding.lacks.filter((lacked) => !isStrangeInput(lacked))).flatMap((group) =>
      lackedSetting(group, context),
    ),
  ];
}
