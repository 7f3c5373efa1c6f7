import { attenuator, loadVpp } from "@/lib/timing/attenuator";
import type { ScreenEnvelope, Span, SyncKind } from "@/lib/timing/envelope";
import { atLeast, atMost, inSpan } from "@/lib/timing/span";
import type { Finding } from "@/lib/profile/finding";
import type { DeviceLimits } from "@/lib/profile/limits";
import { slotPath } from "@/lib/profile/paths";
import { choicesOf } from "@/lib/profile/round";
import { capital, limitSourceText, listText, spanText, withUnit } from "@/lib/profile/words";
import type { CheckContext } from "./context";
import { leaveOut, setValue } from "./remedies";

/** Impedance of video. Source: common practice, no source. */
const VIDEO_LOAD_OHM = 75;

/** Beyond this a cable's own capacitance rounds the sync off. Ours, no source: only a screen's limits that cannot be ask for more. */
const MAX_SERIES_OHM = 100_000;

export const syncNames: Readonly<Record<SyncKind, string>> = {
  separate: "separate sync",
  composite: "composite sync",
  onGreen: "sync on green",
  onLuma: "sync on luma",
};

const syncKinds = Object.keys(syncNames) as SyncKind[]; // the record's own keys

function isKind(word: string): word is SyncKind {
  return word in syncNames;
}

/** The kinds that the device offers. */
function offered(device: DeviceLimits | undefined): readonly SyncKind[] {
  if (!device) return [];
  const words = choicesOf(device, "slots[*].syncKind") ?? device.syncOutputs.map(({ kind }) => kind);
  return words.filter(isKind);
}

/** Kinds of the screen that a slot with this sync kind does not give; null where one of them is unknown or fits. */
export function syncKindFinding(
  number: number,
  kind: SyncKind | undefined,
  screen: ScreenEnvelope,
  device: DeviceLimits | undefined,
): Finding[] {
  const kinds = screen.syncKinds;
  if (kind === undefined || kinds === undefined || kinds.includes(kind)) return [];
  const path = slotPath(number, "syncKind");
  const both = offered(device).filter((one) => kinds.includes(one));
  const ways = device ? both : kinds;
  return [
    {
      rule: "sync.kind",
      path,
      severity: "stop",
      measured: kind,
      limit: kinds.join(", "),
      sentence: `Slot ${number} gives ${syncNames[kind]}, which this screen does not take.`,
      detail:
        kinds.length === 0
          ? `${screen.name} lists no sync at all.`
          : `${screen.name} takes ${listText(kinds.map((one) => syncNames[one]))}.`,
      limitSource: limitSourceText(screen.sources?.syncKinds),
      slots: [number],
      remedies: [...ways.map((one) => setValue(`Use ${syncNames[one]}`, path, one)), leaveOut(number)],
    },
  ];
}

type Level = { readonly vpp: number; readonly loadedVpp: number; readonly sourceOhm: number | undefined };

/** Open-circuit level, and what is left of it at the screen's input. An unknown source impedance divides nothing. */
function levelAt(output: DeviceLimits["syncOutputs"][number], loadOhm: number): Level | null {
  if (output.vpp === undefined) return null;
  const { vpp, sourceOhm } = output;
  return { vpp, loadedVpp: loadVpp(vpp, sourceOhm ?? 0, 0, loadOhm), sourceOhm };
}

/** The resistor that brings a level into the middle of the screen's span, as it can be bought, and what it gives there. */
function resistorText({ vpp, sourceOhm = 0 }: Level, loadOhm: number, syncVpp: Span): string {
  const targetVpp = (syncVpp[0] + syncVpp[1]) / 2;
  const answer = attenuator({ sourceVpp: vpp, sourceOhm, loadOhm, targetVpp });
  if (!answer.ok || answer.value.outcome !== "resistor" || answer.value.seriesOhm > MAX_SERIES_OHM) return "";
  const inside = answer.value.e24.filter(({ resultVpp }) => inSpan(resultVpp, syncVpp));
  const off = ({ resultVpp }: { resultVpp: number }) => Math.abs(resultVpp - targetVpp);
  const [nearest] = inside.sort((one, other) => off(one) - off(other));
  if (nearest === undefined) return "";
  return ` of ${withUnit(nearest.ohm, "Ω", 1)} (E24), which gives ${withUnit(nearest.resultVpp, "V", 2)}`;
}

/** A level is the output's, not the slot's: one finding a kind, about the slots that change, or else those that have it. */
function levelFinding(kind: SyncKind, context: CheckContext, screen: ScreenEnvelope): Finding[] {
  const users = context.slots.filter(({ slot }) => slot.syncKind === kind).map(({ number }) => number);
  const changed = users.filter((number) => !context.unchangedSlots.has(number));
  const slots = changed.length > 0 ? changed : users;
  const [first] = slots;
  if (first === undefined) return [];
  const output = context.device?.syncOutputs.find((one) => one.kind === kind);
  const { syncVpp, loadOhm = VIDEO_LOAD_OHM } = screen;
  const level = output && levelAt(output, loadOhm);
  if (!level || !syncVpp) return [];
  const strong = !atMost(level.loadedVpp, syncVpp[1]);
  if (!strong && atLeast(level.loadedVpp, syncVpp[0])) return [];
  const span = spanText(syncVpp, (value) => withUnit(value, "V", 2));
  const name = capital(syncNames[kind]);
  return [
    {
      rule: "sync.level",
      path: slotPath(first, "syncKind"),
      severity: "caution",
      measured: level.loadedVpp,
      limit: syncVpp,
      unit: "V",
      sentence: strong ? `${name} can be too strong for this screen.` : `${name} can be too weak for this screen.`,
      detail:
        `This device drives ${withUnit(level.vpp, "V", 2)} before a load, ${withUnit(level.loadedVpp, "V", 2)} into ${withUnit(loadOhm, "Ω", 0)}; ` +
        `your screen lists ${span}. ` +
        (strong
          ? `Measure first, or fit an in-line resistor${resistorText(level, loadOhm, syncVpp)}.`
          : "Only an amplifier helps."),
      limitSource: limitSourceText(screen.sources?.syncVpp),
      slots,
      remedies: [],
    },
  ];
}

/** `sync`: the kind of sync that a slot gives, and how strong it is at the screen. */
export function syncFindings(context: CheckContext): Finding[] {
  const { screen, device } = context;
  if (!screen) return [];
  const kinds = context.slots.flatMap(({ number, slot }) => syncKindFinding(number, slot.syncKind, screen, device));
  return [...kinds, ...syncKinds.flatMap((kind) => levelFinding(kind, context, screen))];
}
