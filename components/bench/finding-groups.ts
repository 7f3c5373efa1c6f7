import type { Finding, Remedy, Severity } from "@/lib/profile/finding";
import { parsePath } from "@/lib/profile/paths";

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

/** Whether a finding speaks of a slot or mode that none of these keys touches. */
export function staysAsItIs(finding: Finding, changedKeys: readonly string[]): boolean {
  const parsed = parsePath(finding.path);
  if (!parsed || parsed.scope === "document") return false;
  const owner = parsed.scope === "slot" ? `slots[${parsed.number}]` : `modes[${parsed.key}]`;
  return !changedKeys.some((key) => key.startsWith(owner));
}

/** What is not known of a screen is one thing to read, however many limits it is; so is what stays as it is. */
function groupKey(finding: Finding, stays: (finding: Finding) => boolean): string {
  if (finding.severity === "caution" && stays(finding)) return "stays";
  if (finding.rule.startsWith("unknown.") && finding.severity === "caution") return "unknown";
  return `${finding.severity} ${finding.rule} ${finding.sentence} ${finding.detail ?? ""}`;
}

function merge(key: string, findings: readonly Finding[]): FindingGroup {
  const [first] = findings;
  if (!first) throw new Error("A group has a finding");
  const isList = (key === "unknown" || key === "stays") && findings.length > 1;
  const listSentence = key === "stays" ? `${findings.length} cautions about slots and modes that stay as they are.` : `${findings.length} limits are not known, so they were not checked.`;
  const slots = [...new Set(findings.flatMap((finding) => finding.slots))].sort((a, b) => a - b);
  const where = findings.length > 1 && !isList && slots.length > 0 ? [`Slots ${slots.join(", ")}.`] : [];
  return {
    key, severity: first.severity, rule: first.rule, limitSource: isList ? undefined : first.limitSource,
    sentence: isList ? listSentence : first.sentence,
    details: isList ? findings.map((finding) => finding.sentence) : [...(first.detail === undefined ? [] : [first.detail]), ...where],
    remedies: isList ? [] : [...new Map(findings.flatMap((finding) => finding.remedies).map((remedy) => [remedy.label, remedy])).values()],
    keys: findings.map(findingKey),
  };
}

/**
 * Groups findings, the hardest first, in the order in which they were found.
 *
 * @param stays whether a finding speaks of what the plan does not change
 */
export function groupFindings(findings: readonly Finding[], stays: (finding: Finding) => boolean = () => false): FindingGroup[] {
  const groups = new Map<string, Finding[]>();
  for (const finding of findings) {
    const key = groupKey(finding, stays);
    groups.set(key, [...(groups.get(key) ?? []), finding]);
  }
  return [...groups].map(([key, list]) => merge(key, list)).sort((a, b) => ORDER[a.severity] - ORDER[b.severity]);
}
