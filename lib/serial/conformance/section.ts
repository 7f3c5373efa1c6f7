import { BoundPassed } from "./bounds";
import { MAX_LISTED_FAILURES, MAX_REPORT_TEXT, type ConformanceSection, type FailedCase, type SectionName } from "./report";

const MAX_NOTES = 20;

const shortened = (text: string): string => {
  const plain = text.toWellFormed().replaceAll("\0", " ");
  return plain.length <= MAX_REPORT_TEXT ? plain : `${plain.slice(0, MAX_REPORT_TEXT - 1).toWellFormed()}…`;
};

/** A section while it is filled. */
export type Section = {
  /** Counts a case. @param problem null: it passed */
  judge(name: string, problem: string | null): void;
  /** Runs one case; what it throws is its failure, but for a bound that was passed. @returns what is wrong, or null */
  attempt(name: string, act: () => Promise<string | null>): Promise<void>;
  note(text: string): void;
};

const messageOf = (error: unknown) => (error instanceof Error ? error.message : String(error));

/** Fills one section. A bound that is passed ends it, and the report says so. */
export async function fillSection(name: SectionName, fill: (section: Section) => Promise<void>): Promise<ConformanceSection> {
  const cases: FailedCase[] = [];
  const notes: string[] = [];
  let passed = 0;
  let failed = 0;
  let stopped: string | null = null;
  const section: Section = {
    judge(label, problem) {
      if (problem === null) passed += 1;
      else failed += 1;
      if (problem !== null && cases.length < MAX_LISTED_FAILURES) cases.push({ name: shortened(label), message: shortened(problem) });
    },
    async attempt(label, act) {
      let problem: string | null;
      try {
        problem = await act();
      } catch (error) {
        if (error instanceof BoundPassed) throw error;
        problem = `The definition makes the code fail: ${messageOf(error)}`;
      }
      section.judge(label, problem);
    },
    note(text) {
      if (notes.length < MAX_NOTES) notes.push(shortened(text));
    },
  };
  try {
    await fill(section);
  } catch (error) {
    if (error instanceof BoundPassed) stopped = shortened(error.message);
    else section.judge(name, `The definition makes the code fail: ${messageOf(error)}`);
  }
  return { name, passed, failed, stopped, notes, cases };
}

/** A section that could not begin. */
export function stoppedSection(name: SectionName, why: string): ConformanceSection {
  return { name, passed: 0, failed: 0, stopped: shortened(why), notes: [], cases: [] };
}
