import { formatCount } from "@/components/ui/figures";
import type { BenchRun } from "@/components/bench/store/types";

export type RunWords = { readonly title: string; readonly detail: string };

function slotWords(slots: readonly number[]): string {
  if (slots.length === 0) return "";
  return slots.length === 1 ? ` in slot ${slots[0]}` : ` in slots ${slots.join(", ")}`;
}

/** What the page says of a run: the fact, then what it means and the way on. */
export function runWords(run: BenchRun): RunWords {
  const changes = formatCount(run.changeCount, "change", "changes");
  const where = slotWords(run.changedSlots);
  const why = run.view.why === "" ? "" : ` ${run.view.why}`;
  switch (run.view.state) {
    case "ready":
      return { title: "Comparing the device with the backup.", detail: "Nothing has been written." };
    case "writing":
      return { title: `Writing ${changes}${where}.`, detail: run.storesAtOnce ? "This device stores each value at once. Put back writes the former values again." : "They go to working memory only. Each is read back." };
    case "trying":
      return {
        title: `Trying ${changes}${where}.`,
        detail: run.view.onlyThisPagePutsBack ? "They are put back by this page unless you keep them: leave it open." : "They are put back by themselves unless you keep them.",
      };
    case "keeping":
      return { title: "Keeping.", detail: "The device is read whole, then told to store what it holds." };
    case "kept":
      return { title: `Kept ${changes}${where}.`, detail: `The device holds them in non-volatile memory.${why}` };
    case "called-off":
      return { title: "Called off. Nothing was written.", detail: why.trim() };
    case "putting-back":
      return { title: "Putting the former values back.", detail: why.trim() };
    case "put-back":
      return { title: "Put back.", detail: `The device is as it was before.${why}` };
    case "unconfirmed":
      return { title: "Not confirmed.", detail: `What the device has stored is not proved.${why} Switch the device off and on, then read again.` };
    case "mixed":
      return { title: "Neither old nor new.", detail: `The device could be brought to neither side.${why} Finish writes the new values, Put back the former ones.` };
    case "left":
      return { title: "Left as it is.", detail: "Take a backup, so that it is known how the device stands." };
  }
}
