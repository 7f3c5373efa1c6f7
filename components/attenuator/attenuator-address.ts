/** How the source is known. */
export type Way = "level" | "readings";
/** What the readings were terminated with: asked, never assumed. */
export type Termination = "" | "75" | "other" | "none";

/** The page as it is typed; figures are text, empty where not known. */
export type AttenuatorState = {
  readonly way: Way;
  readonly sourceVpp: string;
  readonly sourceOhm: string;
  readonly firstOhm: string;
  readonly firstVpp: string;
  readonly secondOhm: string;
  readonly secondVpp: string;
  readonly termination: Termination;
  readonly readingOhm: string;
  /** A screen whose level and load are taken over; empty for none. */
  readonly screen: string;
  /** Empty where the screen's own hold, or 75 Ω and 0.3 V without one. */
  readonly loadOhm: string;
  readonly targetVpp: string;
};

/** Query names of the figures. */
const names = {
  sourceVpp: "source",
  sourceOhm: "impedance",
  firstOhm: "r1",
  firstVpp: "v1",
  secondOhm: "r2",
  secondVpp: "v2",
  readingOhm: "with",
  screen: "screen",
  loadOhm: "load",
  targetVpp: "target",
} as const;
type Named = keyof typeof names;

const LONGEST_TEXT = 40;
const terminations: readonly Termination[] = ["", "75", "other", "none"];

export function readAttenuator(query: URLSearchParams): AttenuatorState {
  const text = (name: Named) => (query.get(names[name]) ?? "").slice(0, LONGEST_TEXT);
  const terminated = query.get("terminated") ?? "";
  return {
    way: query.get("way") === "readings" ? "readings" : "level",
    sourceVpp: text("sourceVpp"),
    sourceOhm: text("sourceOhm"),
    firstOhm: text("firstOhm"),
    firstVpp: text("firstVpp"),
    secondOhm: text("secondOhm"),
    secondVpp: text("secondVpp"),
    termination: terminations.find((each) => each === terminated) ?? "",
    readingOhm: text("readingOhm"),
    screen: text("screen"),
    loadOhm: text("loadOhm"),
    targetVpp: text("targetVpp"),
  };
}

/** The address of a state; what is empty is left out. */
export function writeAttenuator(state: AttenuatorState): URLSearchParams {
  const query = new URLSearchParams();
  if (state.way === "readings") query.set("way", "readings");
  if (state.termination !== "") query.set("terminated", state.termination);
  for (const name of Object.keys(names) as readonly Named[]) {
    const value = state[name].trim();
    if (value !== "") query.set(names[name], value);
  }
  return query;
}
