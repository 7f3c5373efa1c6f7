import type { Finding, Remedy, Severity } from "@/lib/profile/finding";

/** Findings that say the same of several slots or modes, told once. */
export type FindingGroup = {
  readonly key: string;
  readonly severity: Severity;
  readonly sentence: string;
  readonly details: readonly string[];
  readonly limitSource: string | undefined;
  readonly rule: string;
  readonly remedies: readonly Remedy[];
  /** What acknowledges all of them. */
  readonly keys: readonly string[];
};

/** What names a finding for an acknowledgement. */
export function findingKey(finding: Finding): string {
  return `${finding.rule} ${finding.path}`;
}

const ORDER: Record<Severity, number> = { stop: 0, caution: 1, note: 2 };

/** What is not known of a screen is one thing to read, however many limits it is. */
function groupKey(finding: Finding): string {
  if (finding.rule.startsWith("unknown.") && finding.severity === "caution") return "unknown";
  return `${finding.severity} ${finding.rule} ${finding.sentence} ${finding.detail ?? ""}`;
}

function merge(key: string, findings: readonly Finding[]): FindingGroup {
  const [first] = findings;
  if (!first) throw new Error("A group has a finding");
  const isList = key === "unknown" && findings.length > 1;
  const slots = [...new Set(findings.flatMap((finding) => finding.slots))].sort((a, b) => a - b);
  const where = findings.length > 1 && !isList && slots.length > 0 ? [`Slots ${slots.join(", ")}.`] : [];
  return {
    key, severity: first.severity, rule: first.rule, limitSource: isList ? undefined : first.limitSource,
    sentence: isList ? `${findings.length} limits are not known, so they were not checked.` : first.sentence,
    details: isList ? findings.map((finding) => finding.sentence) : [...(first.detail === undefined ? [] : [first.detail]), ...where],
    remedies: [...new Map(findings.flatMap((finding) => finding.remedies).map((remedy) => [remedy.label, remedy])).values()],
    keys: findings.map(findingKey),
  };
}

/** Groups findings, the hardest first, in the order in which they were found. */
export function groupFindings(findings: readonly Finding[]): FindingGroup[] {
  const groups = new Map<string, Finding[]>();
  for (const finding of findings) {
    const key = groupKey(finding);
    groups.set(key, [...(groups.get(key) ?? []), finding]);
  }
  return [...groups].map(([key, list]) => merge(key, list)).sort((a, b) => ORDER[a.severity] - ORDER[b.severity]);
}
