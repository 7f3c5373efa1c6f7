import { formatClock, formatFigure, formatLineRateSpan, formatSpan } from "@/components/ui/figures";
import type { EnvelopeLimit, LimitSource, ScreenEnvelope, SyncKind } from "@/lib/timing/envelope";

export const sourceWords: Readonly<Record<LimitSource, string>> = {
  "service-literature": "service literature",
  edid: "EDID",
  standard: "standard",
  measured: "measured",
  guess: "guess",
};

export const limitWords: Readonly<Record<EnvelopeLimit, string>> = {
  bands: "Bands",
  interlace: "Interlace",
  maxPixelClockHz: "Pixel clock at most",
  syncKinds: "Sync kinds",
  syncVpp: "Sync level",
  loadOhm: "Sync input’s load",
  minSyncUs: "Line sync at least",
  minBackPorchUs: "Back porch at least",
  minFieldBlankUs: "Field blanking at least",
  aspect: "Aspect",
  visiblePct: "Hidden by the frame",
};

export const limitOrder: readonly EnvelopeLimit[] = [
  "bands",
  "interlace",
  "maxPixelClockHz",
  "minSyncUs",
  "minBackPorchUs",
  "minFieldBlankUs",
  "syncKinds",
  "syncVpp",
  "loadOhm",
  "aspect",
  "visiblePct",
];

export const syncKindWords: Readonly<Record<SyncKind, string>> = {
  separate: "separate",
  composite: "composite",
  onGreen: "on green",
  onLuma: "on luma",
};

/** "4:3" → "4 : 3", with "upright" where it is taller than wide. */
export function aspectWords(aspect: string): string {
  const [across = 0, up = 0] = aspect.split(":").map(Number);
  return `${across} : ${up}${across < up ? ", upright" : ""}`;
}

/** A limit in words, one line each; empty where it is not known. */
export function limitValues(envelope: ScreenEnvelope, limit: EnvelopeLimit): readonly string[] {
  const number = (value: number | undefined, text: (value: number) => string) =>
    value === undefined ? [] : [text(value)];
  switch (limit) {
    case "bands":
      return envelope.bands.map(
        (band) =>
          `${formatLineRateSpan(band.lineRateHz)} at ${formatSpan(band.fieldRateHz, "Hz", { decimalsAtMost: 2 })}`,
      );
    case "interlace":
      return envelope.interlace === undefined ? [] : [envelope.interlace ? "taken" : "not taken"];
    case "maxPixelClockHz":
      return number(envelope.maxPixelClockHz, formatClock);
    case "syncKinds":
      return envelope.syncKinds === undefined ? [] : [envelope.syncKinds.map((kind) => syncKindWords[kind]).join(", ")];
    case "syncVpp":
      return envelope.syncVpp === undefined
        ? []
        : [formatSpan(envelope.syncVpp, "V peak to peak", { decimalsAtMost: 2 })];
    case "loadOhm":
      return number(envelope.loadOhm, (ohm) => formatFigure(ohm, "Ω"));
    case "minSyncUs":
      return number(envelope.minSyncUs, (us) => formatFigure(us, "µs"));
    case "minBackPorchUs":
      return number(envelope.minBackPorchUs, (us) => formatFigure(us, "µs"));
    case "minFieldBlankUs":
      return number(envelope.minFieldBlankUs, (us) => formatFigure(us, "µs"));
    case "aspect":
      return envelope.aspect === undefined ? [] : [aspectWords(envelope.aspect)];
    case "visiblePct":
      return envelope.visiblePct === undefined ? [] : [hiddenWords(envelope.visiblePct)];
  }
}

function hiddenWords({ left, right, top, bottom }: NonNullable<ScreenEnvelope["visiblePct"]>): string {
  const part = (words: string, value: number) => `${words} ${formatFigure(value, "%", { decimalsAtMost: 1 })}`;
  return [part("left", left), part("right", right), part("top", top), part("bottom", bottom)].join(", ");
}

/** The bands in one short line: "15.577 … 15.892 kHz"; several are joined by "and". */
export function bandsInShort(envelope: ScreenEnvelope): string {
  if (envelope.bands.length === 0) return "not known";
  return envelope.bands.map((band) => formatLineRateSpan(band.lineRateHz)).join(" and ");
}
