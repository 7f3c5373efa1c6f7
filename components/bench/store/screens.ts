import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { screenPresets } from "@/lib/timing/screen-presets";
import { say, sentenceOf, type BenchCore } from "@/components/bench/store/bench-core";
import { replan } from "@/components/bench/store/review";
import type { BenchScreen } from "@/components/bench/store/types";

/** A screen to choose: one of the owner's, or a class of screens. */
export type ScreenChoice = {
  readonly key: string;
  readonly label: string;
  /** The owner's row; null for a class of screens. */
  readonly id: string | null;
  readonly presetId: string | null;
  readonly envelope: ScreenEnvelope;
};

/** Shows it, and plans again what is under review. */
function show(core: BenchCore, screen: BenchScreen): void {
  core.store.setState({ screen });
  replan(core);
}

/** The owner's row for a class of screens: the one made before, else a new one. A plan names its screen by a row. */
async function rowOf(core: BenchCore, { presetId, envelope }: ScreenChoice): Promise<string> {
  const own = await core.around.server.screens();
  const same = own.find((screen) => screen.presetId === presetId && JSON.stringify(screen.envelope) === JSON.stringify(envelope));
  return (same ?? (await core.around.server.createScreen(envelope, presetId))).id;
}

async function rememberAtDevice(core: BenchCore, screenId: string): Promise<void> {
  const { device } = core.store.getState();
  if (!device?.stored || device.stored.screenId === screenId) return;
  const row = await core.around.server.device(device.stored.id);
  await core.around.server.changeDevice(row, { screenId });
  core.store.setState((state) => ({ device: state.device && { ...state.device, stored: state.device.stored && { ...state.device.stored, screenId } } }));
}

/** Takes a screen; where somebody is signed in it becomes one of theirs, and the device remembers it. */
export async function chooseScreen(core: BenchCore, choice: ScreenChoice): Promise<void> {
  show(core, { kind: "known", id: choice.id, envelope: choice.envelope });
  if (!core.around.account) return;
  try {
    const id = choice.id ?? (await rowOf(core, choice));
    show(core, { kind: "known", id, envelope: choice.envelope });
    await rememberAtDevice(core, id);
  } catch (error) {
    say(core, "halt", `The screen is used here, but it was not stored: ${sentenceOf(error)}`);
  }
}

/** Takes a screen by the id of a class of screens, or of an owner's row. What is neither stays unchosen. */
export async function chooseScreenById(core: BenchCore, id: string): Promise<void> {
  const preset = screenPresets.find((one) => one.id === id);
  if (preset) return chooseScreen(core, { key: `preset:${id}`, label: preset.envelope.name, id: null, presetId: id, envelope: preset.envelope });
  const own = core.around.account ? (await core.around.server.screens()).find((one) => one.id === id) : undefined;
  if (own) await chooseScreen(core, { key: id, label: own.name, id, presetId: own.presetId, envelope: own.envelope });
}

/** The owner states that the screen is unknown and accepts that no limit of it was checked. */
export function acceptUnknownScreen(core: BenchCore): void {
  show(core, { kind: "accepted-unknown" });
}

export function forgetScreen(core: BenchCore): void {
  show(core, { kind: "none" });
}
