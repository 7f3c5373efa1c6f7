import { canonicalJson } from "@/lib/profile/canonical";
import type { NativeValues } from "@/lib/serial/native";
import { nativeProblem } from "./compile";
import type { CompiledDriver, CompiledSetting } from "./compiled";
import { toNeutral } from "./neutral";

/**
 * How another version of a driver takes one setting of a stored backup.
 *
 * `added`, `removed`: only one version has it. `meaning`: the same native value is another neutral one. `range`: the new version does
 * not allow the value that is held. `wire`: it is read or written in another way.
 */
export type DifferentReading = {
  readonly key: string;
  readonly label: string;
  readonly kind: "added" | "removed" | "meaning" | "range" | "wire";
  readonly left: unknown;
  readonly right: unknown;
};

/** Differences that are told. */
export const MAX_DIFFERENT_READINGS = 200;

const wireText = ({ source }: CompiledSetting) => canonicalJson(source.wire);

/** One setting that both have; the way of the wire is told once for all slots or modes. */
function compareSetting(was: CompiledSetting, is: CompiledSetting, native: NativeValues[string] | undefined, wiresTold: Set<string>): DifferentReading[] {
  const about = { key: was.key, label: is.label };
  const found: DifferentReading[] = [];
  if (native !== undefined) {
    const [left, right] = [toNeutral(was.value, native), toNeutral(is.value, native)];
    if (left !== right) found.push({ ...about, kind: "meaning", left: left ?? null, right: right ?? null });
    const problem = nativeProblem(was.value, native) === null ? nativeProblem(is.value, native) : null;
    if (problem !== null) found.push({ ...about, kind: "range", left: native, right: problem });
  }
  if (!wiresTold.has(was.pattern) && wireText(was) !== wireText(is)) {
    wiresTold.add(was.pattern);
    found.push({ ...about, key: was.pattern, kind: "wire", left: was.source.wire, right: is.source.wire });
  }
  return found;
}

/**
 * What a new version of a driver reads differently in a backup that was taken with the old one, in the order of the settings.
 * @param values native values as stored; empty: only what both state is compared
 * @returns `MAX_DIFFERENT_READINGS` at most
 */
export function readDifferently(old: CompiledDriver, next: CompiledDriver, values: NativeValues): readonly DifferentReading[] {
  const wiresTold = new Set<string>();
  const oldPatterns = new Map(old.settings.map((setting) => [setting.pattern, setting]));
  const added = next.settings.filter(({ key, pattern }) => !old.byKey.has(key) && !oldPatterns.has(pattern));
  const addedOnce = [...new Map(added.map((setting) => [setting.pattern, setting])).values()];
  const found = old.settings.flatMap((was): DifferentReading[] => {
    const is = next.byKey.get(was.key);
    if (is) return compareSetting(was, is, values[was.key], wiresTold);
    return [{ key: was.key, label: was.label, kind: "removed", left: values[was.key] ?? null, right: null }];
  });
  const news = addedOnce.map((setting): DifferentReading => ({ key: setting.pattern, label: setting.label, kind: "added", left: null, right: setting.initial }));
  return [...found, ...news].slice(0, MAX_DIFFERENT_READINGS);
}
