import { checkProfile } from "@/lib/profile/check/check-profile";
import type { CheckInput } from "@/lib/profile/check/context";
import type { Finding } from "@/lib/profile/finding";

/** All findings of one rule. */
export function found(rule: string, input: CheckInput): Finding[] {
  return checkProfile(input).filter((finding) => finding.rule === rule);
}

/** The one finding of a rule; throws where there is none, or more. */
export function theOne(rule: string, input: CheckInput): Finding {
  const all = found(rule, input);
  const [only] = all;
  if (!only || all.length > 1)
    throw new Error(`${all.length} findings of ${rule}: ${all.map(({ path }) => path).join(", ")}`);
  return only;
}

export const labels = (finding: Finding): string[] => finding.remedies.map(({ label }) => label);
