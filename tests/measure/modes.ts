import { createElement, Fragment } from "react";
import { renderToString } from "react-dom/server";
import { MiddleColumn } from "@/components/modes/middle-column";
import { ModesProvider } from "@/components/modes/modes-context";
import { PlaneColumn } from "@/components/modes/plane-column";
import { createModesStore } from "@/components/modes/store/modes-store";
import { DEFAULT_CHOICES } from "@/components/modes/store/choices";
import { deviceBySlug, toQuery } from "@/components/modes/store/link";
import type { Measurement } from "./measure";

/** The page's promise: what the checks say stands there this long after a key at most. */
const LIMIT_MS = 100;
const RUNS = 15;

/** What somebody types into Lines: each text is what the field holds after one more key. */
const KEYS: readonly { readonly name: string; readonly texts: readonly string[] }[] = [
  { name: "240 lines, which fit", texts: ["2", "24", "240"] },
  { name: "270 lines, which fit nowhere", texts: ["2", "27", "270"] },
];

/** The least over `RUNS` of the slowest key, in ms: what the machine's other work adds is not ours. */
function slowestKeyMs(texts: readonly string[]): number {
  const device = deviceBySlug("lanternfield-lf8") ?? null;
  const runs = Array.from({ length: RUNS }, () => {
    const page = createModesStore({ ...DEFAULT_CHOICES, device, keep: ["fieldRateHz"] });
    // A page that is open listens: what it needs of the state is made with every key too.
    const unsubscribe = page.store.subscribe(({ choices }) => toQuery(choices));
    page.acts.hold("activeLines");
    const times = texts.map((text) => {
      const start = performance.now();
      page.acts.turn("activeLines", Number(text));
      return performance.now() - start;
    });
    unsubscribe();
    if (page.store.getState().answer?.findings.length === 0) throw new Error("There are findings to measure");
    return Math.max(...times);
  });
  return Math.min(...runs);
}

/** The least over `RUNS` of making the answer and drawing it: candidates, reasons, plane and findings, in ms. */
function drawnMs(lines: string): number {
  const query = { lines, keep: "rate", device: "lanternfield-lf8" };
  const columns = () => createElement(Fragment, null, createElement(MiddleColumn), createElement(PlaneColumn));
  const times = Array.from({ length: RUNS }, () => {
    const start = performance.now();
    const page = renderToString(createElement(ModesProvider, { query, children: columns }));
    const ms = performance.now() - start;
    if (!page.includes("data-severity")) throw new Error("There are findings to draw");
    return ms;
  });
  return Math.min(...times);
}

/** How long after a key the candidates, the reasons and the findings of the Modes page are made. */
export function measureModes(): Promise<Measurement[]> {
  return Promise.resolve(
    KEYS.flatMap(({ name, texts }): Measurement[] => [
      {
        name: `Modes page after a key: ${name}`,
        value: slowestKeyMs(texts),
        unit: "ms",
        limit: LIMIT_MS,
      },
      {
        name: `Modes page made and drawn: ${name}`,
        value: drawnMs(texts.at(-1) ?? ""),
        unit: "ms",
        limit: LIMIT_MS,
      },
    ]),
  );
}
