import { acknowledgementOf } from "@/lib/serial/plan/plan-changes";
import { recallSlot } from "@/lib/serial/recall/recall-slot";
import { findSlot } from "@/lib/profile/paths";
import { say, type BenchCore } from "@/components/bench/store/bench-core";
import { readDevice } from "@/components/bench/store/reading";

async function recall(core: BenchCore, slot: number, acknowledged: readonly string[]): Promise<void> {
  const { line, store } = core;
  const { screen, activity, backup } = store.getState();
  if (!line || activity !== "idle") return;
  store.setState({ activity: "recalling", heldRecall: null, notice: null });
  const recalled = await recallSlot({
    session: line.session, driver: line.driver, slot, acknowledged, screen: screen.kind === "known" ? screen.envelope : "unknown",
    expects: backup ? findSlot(backup.content.document, slot)?.expects : undefined,
  });
  store.setState({ activity: "idle" });
  if (recalled.ok && (recalled.value.kind === "stopped" || recalled.value.kind === "ask")) {
    return store.setState({ heldRecall: { slot, findings: recalled.value.findings } });
  }
  await readDevice(core);
  if (!recalled.ok) say(core, "halt", `Slot ${slot} may or may not be on: ${recalled.error.message}`);
  else if (recalled.value.kind === "other-slot") say(core, "halt", `Slot ${slot} was asked for, and slot ${recalled.value.activeSlot} is on.`);
  else say(core, "ok", `Slot ${slot} is on: recalled once and read back.`);
}

/** Checks, and recalls where nothing stands in the way; else the page shows what does. */
export function askRecall(core: BenchCore, slot: number): Promise<void> {
  return recall(core, slot, []);
}

/** After the owner read what was held up. A stop, or something new to read, holds it up again. */
export async function recallHeld(core: BenchCore): Promise<void> {
  const held = core.store.getState().heldRecall;
  if (held) await recall(core, held.slot, held.findings.map(acknowledgementOf));
}
