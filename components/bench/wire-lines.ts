import { hexOf, type WireEntry } from "@/lib/serial/wire-log";

/** One line of the wire log as the page draws it. */
export type WireLine = {
  readonly id: number;
  readonly time: string;
  readonly direction: WireEntry["direction"];
  readonly text: string;
  readonly hex: string;
  readonly tookMs: number | null;
};

function clockTime(wallMs: number): string {
  const at = new Date(wallMs);
  const two = (value: number) => String(value).padStart(2, "0");
  return `${two(at.getHours())}:${two(at.getMinutes())}:${two(at.getSeconds())}.${String(at.getMilliseconds()).padStart(3, "0")}`;
}

/**
 * The last entries whose text or hex has the filter in it.
 *
 * @param most how many lines are drawn
 */
export function wireLines(entries: readonly WireEntry[], filter: string, most: number): WireLine[] {
  const wanted = filter.trim().toUpperCase();
  const found = wanted === "" ? entries : entries.filter((entry) => entry.text.toUpperCase().includes(wanted) || hexOf(entry.bytes).includes(wanted));
  return found.slice(-most).map((entry) => ({
    id: entry.number, time: clockTime(entry.wallMs), direction: entry.direction, hex: hexOf(entry.bytes),
    text: entry.note === undefined ? entry.text : `${entry.text} (${entry.note})`, tookMs: entry.tookMs ?? null,
  }));
}
