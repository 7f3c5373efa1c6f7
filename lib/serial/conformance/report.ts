import { z } from "zod";

/**
 * What a suite of conformance found out about a driver definition: data, as it is stored beside the version and shown.
 * A report is green when every section is whole and nothing failed.
 */
export const CONFORMANCE_FORMAT = "backporch-conformance";
/** Failures that a section lists; it counts all. */
export const MAX_LISTED_FAILURES = 50;
export const MAX_REPORT_TEXT = 400;

export const SECTION_NAMES = ["definition", "reading", "settings", "slots", "memory", "faults", "recordings"] as const;
export type SectionName = (typeof SECTION_NAMES)[number];

/** Said wherever a report is shown. */
export const SIMULATED_SENTENCE =
  "A simulated device is made from this very driver, so it proves the code and not the driver: only a recording speaks for hardware.";

const text = z.string().max(MAX_REPORT_TEXT);

export const failedCaseSchema = z.object({ name: text, message: text });

export const conformanceSectionSchema = z.object({
  name: z.enum(SECTION_NAMES),
  passed: z.number().int().min(0),
  failed: z.number().int().min(0),
  /** Why the section did not run to its end, or what it left out. Null: it is whole. */
  stopped: text.nullable(),
  notes: z.array(text).max(20),
  cases: z.array(failedCaseSchema).max(MAX_LISTED_FAILURES),
});

export const conformanceReportSchema = z.object({
  format: z.literal(CONFORMANCE_FORMAT),
  version: z.literal(1),
  /** SHA-256 over the canonical JSON (RFC 8785) of the definition, in hex. */
  driverHash: z.string().regex(/^[0-9a-f]{64}$/u),
  driver: z.object({ slug: z.string(), version: z.string() }).nullable(),
  sections: z.array(conformanceSectionSchema).length(SECTION_NAMES.length),
  green: z.boolean(),
  /** Recordings that the driver was compared with, by what they were called. */
  recordings: z.array(text).max(20),
  simulatedSentence: z.string(),
  /** What the suite took of its bounds. */
  exchanges: z.number().int().min(0),
  bytes: z.number().int().min(0),
});

export type FailedCase = z.infer<typeof failedCaseSchema>;
export type ConformanceSection = z.infer<typeof conformanceSectionSchema>;
export type ConformanceReport = z.infer<typeof conformanceReportSchema>;
