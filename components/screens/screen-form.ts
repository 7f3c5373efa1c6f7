import { parseFigure } from "@/components/ui/figures";
import { limitWords } from "@/components/screens/limit-words";
import { fail, ok } from "@/lib/result";
import type { PathMessage, Result } from "@/lib/result";
import type { EnvelopeBand, EnvelopeLimit, LimitSource, ScreenEnvelope, SyncKind } from "@/lib/timing/envelope";
import { envelopeProblems } from "@/lib/timing/envelope-problems";

/** A screen as it is typed: figures as text in the units of the page, empty where not known. */
export type ScreenForm = {
  name: string;
  notes: string;
  bands: { lineMinKhz: string; lineMaxKhz: string; fieldMinHz: string; fieldMaxHz: string }[];
  interlace: "unknown" | "taken" | "not-taken";
  maxPixelClockMhz: string;
  minSyncUs: string;
  minBackPorchUs: string;
  minFieldBlankUs: string;
  syncKinds: Record<SyncKind, boolean>;
  syncMinV: string;
  syncMaxV: string;
  loadOhm: string;
  aspect: string;
  hiddenLeftPct: string;
  hiddenRightPct: string;
  hiddenTopPct: string;
  hiddenBottomPct: string;
  sources: Partial<Record<EnvelopeLimit, LimitSource>>;
};

export const syncKinds: readonly SyncKind[] = ["separate", "composite", "onGreen", "onLuma"];
export const aspects = ["4:3", "3:4", "16:9", "9:16", "5:4"] as const;

const text = (value: number | undefined) => (value === undefined ? "" : String(Number(value.toFixed(6))));

/** A form filled with what an envelope says. */
export function formFromEnvelope(envelope: ScreenEnvelope, notes: string): ScreenForm {
  const { interlace, syncVpp, visiblePct } = envelope;
  const takes = (kind: SyncKind) => envelope.syncKinds?.includes(kind) === true;
  return {
    name: envelope.name,
    notes,
    bands: envelope.bands.map(({ lineRateHz, fieldRateHz }) => ({
      lineMinKhz: text(lineRateHz[0] / 1000),
      lineMaxKhz: text(lineRateHz[1] / 1000),
      fieldMinHz: text(fieldRateHz[0]),
      fieldMaxHz: text(fieldRateHz[1]),
    })),
    interlace: interlace === undefined ? "unknown" : interlace ? "taken" : "not-taken",
    maxPixelClockMhz: envelope.maxPixelClockHz === undefined ? "" : text(envelope.maxPixelClockHz / 1e6),
    minSyncUs: text(envelope.minSyncUs),
    minBackPorchUs: text(envelope.minBackPorchUs),
    minFieldBlankUs: text(envelope.minFieldBlankUs),
    syncKinds: {
      separate: takes("separate"),
      composite: takes("composite"),
      onGreen: takes("onGreen"),
      onLuma: takes("onLuma"),
    },
    syncMinV: text(syncVpp?.[0]),
    syncMaxV: text(syncVpp?.[1]),
    loadOhm: text(envelope.loadOhm),
    aspect: envelope.aspect ?? "",
    hiddenLeftPct: text(visiblePct?.left),
    hiddenRightPct: text(visiblePct?.right),
    hiddenTopPct: text(visiblePct?.top),
    hiddenBottomPct: text(visiblePct?.bottom),
    sources: { ...envelope.sources },
  };
}

/** A band to fill in. */
export const emptyBand: ScreenForm["bands"][number] = {
  lineMinKhz: "",
  lineMaxKhz: "",
  fieldMinHz: "",
  fieldMaxHz: "",
};

/** Collects what cannot be read while the rest is. */
class Reader {
  readonly problems: PathMessage[] = [];

  figure(path: string, typed: string, scale = 1): number | undefined {
    if (typed.trim() === "") return undefined;
    const value = parseFigure(typed);
    if (value === null) {
      this.problems.push({ path, message: "This is no figure." });
      return undefined;
    }
    // 15.734 kHz is 15 734 Hz: without rounding the product is a hair beside it.
    return Number((value * scale).toFixed(6));
  }

  pair(
    paths: readonly [string, string],
    typed: readonly [string, string],
    scale = 1,
  ): readonly [number, number] | undefined {
    const [low, high] = [this.figure(paths[0], typed[0], scale), this.figure(paths[1], typed[1], scale)];
    if (low !== undefined && high !== undefined) return [low, high];
    const missing = low === undefined ? 0 : 1;
    if (low !== high && typed[missing].trim() === "") {
      this.problems.push({ path: paths[missing], message: "Give both ends, or neither." });
    }
    return undefined;
  }

  band(index: number, band: ScreenForm["bands"][number]): EnvelopeBand | undefined {
    const at = (name: string) => `bands.${index}.${name}`;
    const line = this.pair([at("lineMinKhz"), at("lineMaxKhz")], [band.lineMinKhz, band.lineMaxKhz], 1000);
    const field = this.pair([at("fieldMinHz"), at("fieldMaxHz")], [band.fieldMinHz, band.fieldMaxHz]);
    if (line !== undefined && field !== undefined) return { lineRateHz: line, fieldRateHz: field };
    const isEmpty = Object.values(band).every((value) => value.trim() === "");
    if (isEmpty) this.problems.push({ path: at("lineMinKhz"), message: "Fill this band in, or take it away." });
    else if (this.problems.length === 0)
      this.problems.push({
        path: at(line === undefined ? "lineMinKhz" : "fieldMinHz"),
        message: "A band needs line rates and field rates.",
      });
    return undefined;
  }
}

/** Form field that a path of `envelopeProblems` is about. */
function fieldOf(path: string): string {
  return path
    .replace(/^bands\[(\d+)\]\.lineRateHz$/u, "bands.$1.lineMinKhz")
    .replace(/^bands\[(\d+)\]\.fieldRateHz$/u, "bands.$1.fieldMinHz")
    .replace(/^maxPixelClockHz$/u, "maxPixelClockMhz")
    .replace(/^syncVpp$/u, "syncMinV");
}

function hiddenOf(form: ScreenForm, reader: Reader): ScreenEnvelope["visiblePct"] {
  const edges = {
    left: reader.figure("hiddenLeftPct", form.hiddenLeftPct),
    right: reader.figure("hiddenRightPct", form.hiddenRightPct),
    top: reader.figure("hiddenTopPct", form.hiddenTopPct),
    bottom: reader.figure("hiddenBottomPct", form.hiddenBottomPct),
  };
  if (Object.values(edges).every((edge) => edge === undefined)) return undefined;
  const { left = 0, right = 0, top = 0, bottom = 0 } = edges;
  for (const [name, value] of Object.entries({ left, right, top, bottom })) {
    if (value < 0 || value > 40) {
      const field = `hidden${name.charAt(0).toUpperCase()}${name.slice(1)}Pct`;
      reader.problems.push({ path: field, message: "From 0 to 40 % of the picture." });
    }
  }
  return { left, right, top, bottom };
}

/**
 * The envelope that a form states. Sources stay only for limits that are known.
 *
 * @returns the envelope, or each field that cannot be taken, by its name in the form
 */
export function envelopeFromForm(form: ScreenForm): Result<ScreenEnvelope, readonly PathMessage[]> {
  const reader = new Reader();
  if (form.name.trim() === "") reader.problems.push({ path: "name", message: "Give the screen a name." });
  const bands = form.bands.map((band, index) => reader.band(index, band)).filter((band) => band !== undefined);
  const kinds = syncKinds.filter((kind) => form.syncKinds[kind]);
  const stated: ScreenEnvelope = {
    name: form.name.trim(),
    bands,
    interlace: form.interlace === "unknown" ? undefined : form.interlace === "taken",
    maxPixelClockHz: reader.figure("maxPixelClockMhz", form.maxPixelClockMhz, 1e6),
    minSyncUs: reader.figure("minSyncUs", form.minSyncUs),
    minBackPorchUs: reader.figure("minBackPorchUs", form.minBackPorchUs),
    minFieldBlankUs: reader.figure("minFieldBlankUs", form.minFieldBlankUs),
    syncKinds: kinds.length === 0 ? undefined : kinds,
    syncVpp: reader.pair(["syncMinV", "syncMaxV"], [form.syncMinV, form.syncMaxV]),
    loadOhm: reader.figure("loadOhm", form.loadOhm),
    aspect: form.aspect === "" ? undefined : form.aspect,
    visiblePct: hiddenOf(form, reader),
  };
  const problems =
    reader.problems.length > 0
      ? reader.problems
      : envelopeProblems(stated).map(({ path, message }) => ({ path: fieldOf(path), message }));
  if (problems.length > 0) return fail(problems);
  const sources = Object.fromEntries(
    (Object.keys(limitWords) as EnvelopeLimit[]).flatMap((limit) => {
      const isKnown = limit === "bands" ? bands.length > 0 : stated[limit] !== undefined;
      const source = form.sources[limit];
      return isKnown && source !== undefined ? [[limit, source]] : [];
    }),
  );
  const known = Object.fromEntries(Object.entries(stated).filter(([, value]) => value !== undefined)) as ScreenEnvelope;
  return ok({ ...known, sources });
}
