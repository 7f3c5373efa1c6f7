import { recallSlot } from "@/lib/serial/recall/recall-slot";
import { say, type BenchCore } from "@/components/bench/store/bench-core";
import { readDevice } from "@/components/bench/store/reading";

async function recall(core: BenchCore, slot: number, isAccepted: boolean): Promise<void> {
  const { line, store } = core;
  const { reading, screen, activity } = store.getState();
  if (!line || !reading || activity !== "idle") return;
  store.setState({ activity: "recalling", heldRecall: null, notice: null });
  const recalled = await recallSlot({
    session: line.session, driver: line.driver.definition, document: reading.content.document, slot, isAccepted,
    screen: screen.kind === "known" ? screen.envelope : undefined, arriving: reading.arriving,
  });
  store.setState({ activity: "idle" });
  if (!recalled.ok && recalled.error.code === "held") return store.setState({ heldRecall: { slot, findings: recalled.error.findings } });
  await readDevice(core);
  if (recalled.ok) say(core, "ok", `Slot ${slot} is on: recalled once and read back.`);
  else if (recalled.error.code === "not-recalled") say(core, "halt", `Slot ${slot} was asked for, and slot ${recalled.error.activeSlot} is on.`);
  else if (recalled.error.code === "line") say(core, "halt", `Slot ${slot} may or may not be on: ${recalled.error.message}`);
}

/** Checks, and recalls where nothing stands in the way; else the page shows what does. */
export function askRecall(core: BenchCore, slot: number): Promise<void> {
  return recall(core, slot, false);
}

/** After the owner read what was held up. A stop holds it up again. */
export async function recallHeld(core: BenchCore): Promise<void> {
  const held = core.store.getState().heldRecall;
  if (held) await recall(core, held.slot, true);
}
