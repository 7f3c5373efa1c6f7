import type { Finding, Remedy } from "@/lib/profile/finding";
import { modePath, slotPath } from "@/lib/profile/paths";
import type { CheckContext } from "./context";
import { leaveOutAll, setValue } from "./remedies";

type Text = {
  readonly pattern: string;
  readonly path: string;
  readonly what: string;
  readonly value: string;
  readonly slots: readonly number[];
};

function texts(context: CheckContext): Text[] {
  const slots = context.slots.flatMap(({ number, slot }) =>
    slot.name === undefined
      ? []
      : [
          {
            pattern: "slots[*].name",
            path: slotPath(number, "name"),
            what: `Slot ${number}'s name`,
            value: slot.name,
            slots: [number],
          },
        ],
  );
  const modes = context.modes.flatMap(({ key, mode, users }) =>
    mode.name === undefined
      ? []
      : [
          {
            pattern: "modes[*].name",
            path: modePath(key, "name"),
            what: `Mode ${key}'s name`,
            value: mode.name,
            slots: users,
          },
        ],
  );
  return [...slots, ...modes];
}

function textFindings(text: Text, context: CheckContext): Finding[] {
  const limit = context.device?.texts[text.pattern];
  if (!limit) return [];
  const characters = [...text.value];
  const strange = [...new Set(characters.filter((character) => !limit.characters.includes(character)))];
  const held = characters.filter((character) => limit.characters.includes(character));
  const fitting = held.slice(0, limit.maxLength).join("").trimEnd();
  const remedies: Remedy[] = [
    ...(fitting === "" ? [] : [setValue(`Use “${fitting}”`, text.path, fitting)]),
    ...leaveOutAll(text.slots.filter((slot) => !context.unchangedSlots.has(slot))),
  ];
  const base = { path: text.path, severity: "stop" as const, limitSource: "driver", slots: text.slots, remedies };
  const long: Finding[] =
    characters.length <= limit.maxLength
      ? []
      : [
          {
            ...base,
            rule: "device.name-length",
            measured: characters.length,
            limit: limit.maxLength,
            unit: "characters",
            sentence: `${text.what} has ${characters.length} characters, and this device holds ${limit.maxLength}.`,
          },
        ];
  const unknown: Finding[] =
    strange.length === 0
      ? []
      : [
          {
            ...base,
            rule: "device.name-characters",
            measured: strange.join(""),
            sentence: `${text.what} has characters that this device does not show: ${strange.slice(0, 10).join(" ")}.`,
          },
        ];
  return [...long, ...unknown];
}

/** `device` names: their length and the characters that the device holds. */
export function deviceTextFindings(context: CheckContext): Finding[] {
  return texts(context).flatMap((text) => textFindings(text, context));
}
