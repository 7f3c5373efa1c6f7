import { hashValue } from "@/lib/profile/canonical";
import type { Clock } from "@/lib/serial/clock";
import { parseDefinition, storageProblems } from "@/lib/serial/driver/parse-definition";
import { CONFORMANCE_BOUNDS, createBudget, type Budget, type ConformanceBounds } from "./bounds";
import { judgeDefinition } from "./definition-section";
import { judgeReading, judgeSettings, judgeSlots } from "./device-sections";
import { judgeFaults } from "./fault-section";
import { judgeMemory } from "./memory-section";
import { judgeRecordings, type NamedRecording } from "./recording-section";
import { CONFORMANCE_FORMAT, SECTION_NAMES, SIMULATED_SENTENCE, type ConformanceReport, type ConformanceSection, type SectionName } from "./report";
import { fillSection, stoppedSection, type Section } from "./section";
import type { Surroundings } from "./test-bench";

export type ConformanceOptions = {
  readonly recordings?: readonly NamedRecording[];
  /** Real time, for the bound on it: a definition from a stranger ends when it is over. */
  readonly clock: Clock;
  readonly signal?: AbortSignal;
  /** After each section, with what it found. */
  readonly onSection?: (section: ConformanceSection) => void;
  /** Narrower bounds than the suite's own, for tests. */
  readonly bounds?: Partial<ConformanceBounds>;
};

const JUDGES: Readonly<Record<Exclude<SectionName, "definition" | "recordings">, (around: Surroundings, section: Section) => Promise<void>>> = {
  reading: judgeReading, settings: judgeSettings, slots: judgeSlots, memory: judgeMemory, faults: judgeFaults,
};

const isWhole = ({ failed, stopped }: ConformanceSection) => failed === 0 && stopped === null;

/** The hash under which a definition is known; zeros for one that has no canonical form and so cannot be stored. */
export function definitionHash(definition: unknown): string {
  return storageProblems(definition).length > 0 ? "0".repeat(64) : hashValue(definition);
}

async function sectionsOf(definition: unknown, budget: Budget, bounds: ConformanceBounds, { recordings = [], onSection }: ConformanceOptions): Promise<readonly ConformanceSection[]> {
  const parsed = parseDefinition(definition);
  const sections: ConformanceSection[] = [];
  for (const name of SECTION_NAMES) {
    let section: ConformanceSection;
    if (name === "definition") {
      section = await fillSection(name, async (filled) => {
        if (parsed.ok) judgeDefinition(parsed.value.driver, filled);
        else for (const { path, message } of parsed.error) filled.judge(path === "" ? "the whole" : path, message);
      });
    } else if (!parsed.ok) section = stoppedSection(name, "The definition does not compile.");
    else if (name !== "reading" && sections.some((one) => one.name === "reading" && one.passed === 0)) section = stoppedSection(name, "No session opens with this driver.");
    else {
      const around: Surroundings = { driver: parsed.value.driver, bounds, budget };
      section = await fillSection(name, (filled) => {
        budget.check();
        return name === "recordings" ? judgeRecordings(around, filled, recordings) : JUDGES[name](around, filled);
      });
    }
    sections.push(section);
    onSection?.(section);
  }
  return sections;
}

/**
 * Runs a driver definition against a device made from it, in virtual time, and against recordings.
 *
 * Takes any value, also a hostile one: it always ends, within `CONFORMANCE_BOUNDS`, and yields to the event loop between steps of
 * virtual time, so that a page or a server goes on. Nothing throws; what the definition makes fail is a failed case.
 */
export async function runConformance(definition: unknown, options: ConformanceOptions): Promise<ConformanceReport> {
  const bounds: ConformanceBounds = { ...CONFORMANCE_BOUNDS, ...options.bounds };
  const budget = createBudget(bounds, options.clock, options.signal);
  const sections = await sectionsOf(definition, budget, bounds, options);
  const parsed = parseDefinition(definition);
  return {
    format: CONFORMANCE_FORMAT, version: 1,
    driverHash: definitionHash(definition),
    driver: parsed.ok ? { slug: parsed.value.definition.slug, version: parsed.value.definition.version } : null,
    sections: [...sections],
    green: sections.every(isWhole),
    recordings: (options.recordings ?? []).slice(0, bounds.recordings).map(({ name }) => name),
    simulatedSentence: SIMULATED_SENTENCE,
    exchanges: budget.exchanges, bytes: budget.bytes,
  };
}
