import { runTransitions } from "@/db/schema/run-transitions";
import { fail, ok } from "@/lib/result";
import type { Result } from "@/lib/result";
import type { JournalEntry, OwnerWord, RunState } from "@/lib/serial/run/types";

/** Where a run stands by its journal. `keepTaken`: the owner kept in the trial that it is in. */
export type RunStanding = {
  readonly state: RunState;
  /** The state before, where this is a move. */
  readonly cameFrom: RunState | null;
  readonly lastWord: OwnerWord | null;
  readonly keepTaken: boolean;
};

/**
 * "keep-taken": the trial was kept already. "not-a-move": a state that does not follow from the one before.
 * "other-step": the number belongs to a step of another kind.
 */
export type JournalRefusal = "keep-taken" | "not-a-move" | "other-step";

type Held = Omit<RunStanding, "cameFrom"> & {
  /** The highest step that told a state. */
  readonly lastStateStep: number;
};

/** The same step told again, whatever its outcome. */
function isSameStep(a: JournalEntry, b: JournalEntry): boolean {
  if (a.kind === "state" && b.kind === "state") return a.state === b.state;
  if (a.kind === "word" && b.kind === "word") return a.word === b.word && a.atMs === b.atMs;
  return a.kind === b.kind;
}

function takeWord(standing: RunStanding, word: OwnerWord): Result<RunStanding, JournalRefusal> {
  const keeps = word === "keep" && (standing.state === "trying" || standing.state === "keeping");
  if (keeps && (standing.keepTaken || standing.state === "keeping")) return fail("keep-taken");
  return ok({ ...standing, cameFrom: null, lastWord: word, keepTaken: standing.keepTaken || keeps });
}

function takeState(standing: RunStanding, state: RunState): Result<RunStanding, JournalRefusal> {
  if (!runTransitions[standing.state].includes(state)) return fail("not-a-move");
  // A new trial can be kept anew; from `trying` to `keeping` the keep stands.
  return ok({ ...standing, state, cameFrom: standing.state, keepTaken: state === "keeping" && standing.keepTaken });
}

/**
 * The standings that new entries lead a run through, in order; empty when nothing is new.
 * @param known entries of the same step numbers that are stored already
 */
export function walkJournal(
  held: Held,
  known: readonly JournalEntry[],
  entries: readonly JournalEntry[],
): Result<readonly RunStanding[], JournalRefusal> {
  const knownByNumber = new Map(known.map((entry) => [entry.number, entry]));
  const { lastStateStep, state, lastWord, keepTaken } = held;
  let standing: RunStanding = { state, lastWord, keepTaken, cameFrom: null };
  const standings: RunStanding[] = [];
  for (const entry of [...entries].sort((a, b) => a.number - b.number)) {
    const before = knownByNumber.get(entry.number);
    if (before !== undefined && !isSameStep(before, entry)) return fail("other-step");
    const told = before !== undefined || (entry.kind === "state" && entry.number <= lastStateStep);
    if (told || (entry.kind !== "word" && entry.kind !== "state")) continue;
    if (entry.kind === "state" && entry.state === standing.state) continue;
    const taken = entry.kind === "word" ? takeWord(standing, entry.word) : takeState(standing, entry.state);
    if (!taken.ok) return taken;
    standing = taken.value;
    standings.push(standing);
  }
  return ok(standings);
}
