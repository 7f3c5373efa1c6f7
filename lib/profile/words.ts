import type { LimitSource } from "@/lib/timing/envelope";
import { figure } from "@/lib/timing/figure-text";

/** A figure and its unit: "97.6 %". A count of one has its unit in the singular: "1 line". */
export function withUnit(value: number, unit: string | undefined, decimals = 3): string {
  if (unit === undefined || unit === "") return figure(value, { decimalsAtMost: decimals });
  const singular = Math.abs(value) === 1 && unit.endsWith("lines") ? unit.slice(0, -1) : unit;
  return `${figure(value, { decimalsAtMost: decimals })} ${singular}`;
}

/** "97.6 %", "100.0 %": sizes keep one decimal, so that they stand below one another. */
export function percent(value: number): string {
  const one = Math.abs(value * 10 - Math.round(value * 10)) < 1e-6;
  return one ? `${figure(value, { decimals: 1 })} %` : withUnit(value, "%");
}

/** 15 734.266 → "15.734 kHz". */
export function lineRateText(rateHz: number): string {
  return `${(rateHz / 1000).toFixed(3)} kHz`;
}

/** 60.0544 → "60.054 Hz". */
export function fieldRateText(rateHz: number): string {
  return `${rateHz.toFixed(3)} Hz`;
}

/** 27 000 000 → "27.000 MHz". */
export function clockText(clockHz: number): string {
  return `${(clockHz / 1e6).toFixed(3)} MHz`;
}

/** 4.593 → "4.59 µs"; long ones without the decimals: "1 207 µs". */
export function microsecondText(us: number): string {
  return us >= 100 ? withUnit(us, "µs", 0) : `${us.toFixed(2)} µs`;
}

/** Both ends of a limit, the unit once: "15.577 to 15.892 kHz". */
export function spanText(span: readonly [number, number], text: (value: number) => string): string {
  const [low, high] = [text(span[0]), text(span[1])];
  const unit = low.slice(low.lastIndexOf(" "));
  return `${low.endsWith(unit) && high.endsWith(unit) ? low.slice(0, -unit.length) : low} to ${high}`;
}

/** "a, b and c" */
export function listText(parts: readonly string[]): string {
  if (parts.length < 2) return parts.join("");
  return `${parts.slice(0, -1).join(", ")} and ${parts.at(-1)}`;
}

/** "slot 3", "slots 1, 3 and 4" */
export function slotsText(slots: readonly number[]): string {
  return `${slots.length === 1 ? "slot" : "slots"} ${listText(slots.map(String))}`;
}

const limitSources: Readonly<Record<LimitSource, string>> = {
  "service-literature": "service literature",
  edid: "EDID",
  standard: "standard",
  measured: "measured",
  guess: "a guess",
};

/** Where a screen's limit comes from, in words. */
export function limitSourceText(source: LimitSource | undefined): string {
  return source === undefined ? "screen" : limitSources[source];
}

/** A sentence that starts with a capital letter. */
export function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
