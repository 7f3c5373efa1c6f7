import { fail, ok, type PathMessage, type Result } from "@/lib/result";
import { modeName } from "@/lib/timing/mode-name";
import { formatModeline } from "@/lib/timing/modeline/format-modeline";
import { parseModeline } from "@/lib/timing/modeline/parse-modeline";
import { rasterProblems } from "@/lib/timing/raster-problems";
import type { RasterTiming } from "@/lib/timing/raster";

/** A modeline or a timing with a name; the answer has both. */
export type ModelineInput =
  { readonly modeline: string } | { readonly timing: RasterTiming; readonly name?: string | undefined };

export type ModelineOutput = {
  readonly name: string;
  readonly timing: RasterTiming;
  /** As we write it: counts of a doublescan line are doubled, polarities always stated. */
  readonly modeline: string;
  readonly notes: readonly string[];
};

/** Reads or writes a modeline. Errors: by path, `modeline` or a member of the timing. */
export function convertModeline(input: ModelineInput): Result<ModelineOutput, PathMessage[]> {
  if ("modeline" in input) {
    const parsed = parseModeline(input.modeline);
    if (!parsed.ok) {
      const { message, at } = parsed.error;
      return fail([{ path: "modeline", message: at === undefined ? message : `${message} ("${at}")` }]);
    }
    const { timing, notes } = parsed.value;
    const name = parsed.value.name === "" ? modeName(timing) : parsed.value.name;
    return ok({ name, timing, modeline: formatModeline(timing, name), notes });
  }
  const problems = rasterProblems(input.timing).map(({ path, message }) => ({ path: `timing.${path}`, message }));
  if (problems.length > 0) return fail(problems);
  const name = input.name === undefined || input.name.trim() === "" ? modeName(input.timing) : input.name.trim();
  return ok({ name, timing: input.timing, modeline: formatModeline(input.timing, name), notes: [] });
}
