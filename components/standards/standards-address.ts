import { parseFigure } from "@/components/ui/figures";
import type { CatalogueDocument } from "@/lib/timing/catalogue/catalogue-entry";
import type { CatalogueQuery } from "@/lib/timing/catalogue/search-catalogue";

/** Documents by the word that the address has for them. */
export const documentsByKey: Readonly<Record<string, CatalogueDocument>> = {
  cta: "CTA-861",
  dmt: "VESA DMT",
  itu: "ITU-R BT.601 and BT.470",
};

/** Columns that the list can be ordered by. */
export const orders = [
  "name",
  "document",
  "line",
  "field",
  "lineTotal",
  "fieldLines",
  "clock",
  "front",
  "sync",
  "back",
  "picture",
  "fits",
] as const;
export type Order = (typeof orders)[number];

export type StandardsState = {
  readonly text: string;
  /** As typed; what is no figure filters nothing. */
  readonly lines: string;
  readonly rate: string;
  /** A key of `documentsByKey`, or empty for all. */
  readonly document: string;
  /** An owner's screen or a standard envelope; null for the owner's first, empty for none. */
  readonly screen: string | null;
  readonly fitting: boolean;
  readonly order: { readonly id: Order; readonly desc: boolean };
  /** Ids of the entries to compare, two at most. */
  readonly picked: readonly string[];
  readonly comparing: boolean;
  readonly laid: "under" | "over";
};

const LONGEST_TEXT = 100;
/** Two are compared; a third takes the place of the first. */
export const MOST_PICKED = 2;

const isOrder = (id: string): id is Order => (orders as readonly string[]).includes(id);

function orderOf(text: string): StandardsState["order"] {
  const desc = text.startsWith("-");
  const id = desc ? text.slice(1) : text;
  return isOrder(id) ? { id, desc } : { id: "line", desc: false };
}

/** The state of the page that an address means. */
export function readStandards(query: URLSearchParams): StandardsState {
  const text = (name: string) => (query.get(name) ?? "").slice(0, LONGEST_TEXT);
  const document = text("document");
  const picked = text("pick")
    .split(",")
    .filter((id) => id !== "")
    .slice(0, MOST_PICKED);
  return {
    text: text("q"),
    lines: text("lines"),
    rate: text("rate"),
    document: Object.hasOwn(documentsByKey, document) ? document : "",
    screen: query.has("screen") ? text("screen") : null,
    fitting: query.get("fitting") === "true",
    order: orderOf(text("order")),
    picked,
    comparing: query.get("compare") === "true" && picked.length === MOST_PICKED,
    laid: query.get("laid") === "over" ? "over" : "under",
  };
}

/** The address of a state; what is as at first is left out. */
export function writeStandards(state: StandardsState): URLSearchParams {
  const { order } = state;
  const entries: readonly (readonly [string, string | null])[] = [
    ["q", state.text.trim()],
    ["lines", state.lines.trim()],
    ["rate", state.rate.trim()],
    ["document", state.document],
    ["fitting", state.fitting ? "true" : ""],
    ["order", order.id === "line" && !order.desc ? "" : `${order.desc ? "-" : ""}${order.id}`],
    ["pick", state.picked.join(",")],
    ["compare", state.comparing ? "true" : ""],
    ["laid", state.laid === "over" ? "over" : ""],
  ];
  const query = new URLSearchParams(entries.flatMap(([name, value]) => (value ? [[name, value]] : [])));
  // An empty screen is a choice: none.
  if (state.screen !== null) query.set("screen", state.screen);
  return query;
}

/** Takes an entry into the comparison or out of it. */
export function togglePick(picked: readonly string[], id: string): readonly string[] {
  return picked.includes(id) ? picked.filter((other) => other !== id) : [...picked, id].slice(-MOST_PICKED);
}

function figureOf(typed: string): number | undefined {
  return typed.trim() === "" ? undefined : (parseFigure(typed) ?? undefined);
}

/** What the catalogue is searched for. A figure that cannot be read filters nothing. */
export function queryOf({ text, lines, rate }: StandardsState): CatalogueQuery {
  return { text, lines: figureOf(lines), rateHz: figureOf(rate) };
}
