import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { say, sentenceOf, type BenchCore } from "@/components/bench/store/bench-core";
import { replan } from "@/components/bench/store/review";
import type { BenchScreen } from "@/components/bench/store/types";

/** Shows it, and plans again what is under review. */
function show(core: BenchCore, screen: BenchScreen): void {
  core.store.setState({ screen });
  replan(core);
}

/** Takes one of the owner's screens, or a class of screens; the device remembers an owned one. */
export async function chooseScreen(core: BenchCore, envelope: ScreenEnvelope, id: string | null): Promise<void> {
  show(core, { kind: "known", id, envelope });
  const { device } = core.store.getState();
  if (!device?.stored || id === null || device.stored.screenId === id) return;
  try {
    const row = await core.around.server.findDevice(device.driver.slug, device.identity.serialNumber ?? "");
    if (row) await core.around.server.changeDevice(row, { screenId: id });
    core.store.setState((state) => ({ device: state.device && { ...state.device, stored: state.device.stored && { ...state.device.stored, screenId: id } } }));
  } catch (error) {
    say(core, "halt", `The screen is used here, but the device's row was not changed: ${sentenceOf(error)}`);
  }
}

/** The owner states that the screen is unknown and accepts that no limit of it was checked. */
export function acceptUnknownScreen(core: BenchCore): void {
  show(core, { kind: "accepted-unknown" });
}

export function forgetScreen(core: BenchCore): void {
  show(core, { kind: "none" });
}
