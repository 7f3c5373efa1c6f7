import { ok, type Result } from "@/lib/result";
import type { EdidError, EdidReading, EdidScreen, EdidTiming } from "@/lib/timing/edid/edid-types";
import { parseEdid } from "@/lib/timing/edid/parse-edid";
import type { EnvelopeBand, EnvelopeLimit, LimitSource, ScreenEnvelope, SyncKind } from "@/lib/timing/envelope";
import { MAX_BANDS } from "@/lib/timing/envelope-problems";
import { mHz } from "@/lib/timing/figure-text";
import { fieldRateHz, lineRateHz } from "@/lib/timing/rates";

/** Either way of a listed timing, where an EDID has no range limits: the tolerance of a CTA-861 format's clock. */
const AROUND_A_TIMING = 0.005;

/** Shapes that screens have; an EDID states whole centimetres, so the nearest within 4 % is meant. */
const aspects = ["4:3", "5:4", "16:10", "16:9", "21:9", "3:4", "4:5", "10:16", "9:16"];
const ASPECT_TOLERANCE = 0.04;

function aspectOf({ sizeCm }: EdidReading): string | undefined {
  if (sizeCm === undefined) return undefined;
  const ratio = sizeCm.width / sizeCm.height;
  const off = (aspect: string) => {
    const [width = 1, height = 1] = aspect.split(":").map(Number);
    return Math.abs(ratio / (width / height) - 1);
  };
  const nearest = aspects.reduce((best, aspect) => (off(aspect) < off(best) ? aspect : best));
  return off(nearest) <= ASPECT_TOLERANCE ? nearest : undefined;
}

function syncKindsOf({ syncs }: EdidReading): SyncKind[] | undefined {
  if (syncs === undefined) return undefined;
  const kinds: [SyncKind, boolean][] = [
    ["separate", syncs.separate],
    ["composite", syncs.composite],
    ["onGreen", syncs.onGreen],
  ];
  const taken = kinds.flatMap(([kind, is]) => (is ? [kind] : []));
  return taken.length > 0 ? taken : undefined;
}

const hull = (a: EnvelopeBand, b: EnvelopeBand): EnvelopeBand => ({
  lineRateHz: [Math.min(a.lineRateHz[0], b.lineRateHz[0]), Math.max(a.lineRateHz[1], b.lineRateHz[1])],
  fieldRateHz: [Math.min(a.fieldRateHz[0], b.fieldRateHz[0]), Math.max(a.fieldRateHz[1], b.fieldRateHz[1])],
});

const overlap = (a: EnvelopeBand, b: EnvelopeBand) =>
  a.lineRateHz[0] <= b.lineRateHz[1] &&
  b.lineRateHz[0] <= a.lineRateHz[1] &&
  a.fieldRateHz[0] <= b.fieldRateHz[1] &&
  b.fieldRateHz[0] <= a.fieldRateHz[1];

/** One small band about each listed timing, those that overlap joined; beyond 16 the later ones are left out. */
function bandsOfTimings(timings: readonly EdidTiming[]): { bands: EnvelopeBand[]; leftOut: number } {
  const around = (rate: number) => [rate * (1 - AROUND_A_TIMING), rate * (1 + AROUND_A_TIMING)] as const;
  const bands: EnvelopeBand[] = [];
  for (const { timing } of timings) {
    const band = { lineRateHz: around(lineRateHz(timing)), fieldRateHz: around(fieldRateHz(timing)) };
    const index = bands.findIndex((other) => overlap(other, band));
    const other = bands[index];
    if (other === undefined) bands.push(band);
    else bands[index] = hull(other, band);
  }
  return { bands: bands.slice(0, MAX_BANDS), leftOut: Math.max(0, bands.length - MAX_BANDS) };
}

function nameOf({ product }: EdidReading): string {
  return product.name ?? `${product.maker} ${product.code.toString(16).padStart(4, "0")}`;
}

function bandsAndNotes(reading: EdidReading): { bands: readonly EnvelopeBand[]; notes: string[]; known: boolean } {
  const { ranges, timings } = reading;
  if (ranges !== undefined) {
    const exact = ranges.exactPixelClockHz;
    const finer = exact === undefined ? [] : [`Its pixel clock limit is rounded up from ${mHz(exact)}.`];
    return { bands: [ranges], notes: ["Rates and pixel clock are those of its range limits.", ...finer], known: true };
  }
  const { bands, leftOut } = bandsOfTimings(timings);
  if (bands.length === 0)
    return { bands: [], notes: ["It has neither range limits nor timings: its rates are not known."], known: false };
  const notes = ["It has no range limits: the rates are those of its timings, half a per cent either way."];
  if (leftOut > 0) notes.push(`${leftOut} of its timings are left out: a screen has ${MAX_BANDS} bands at most.`);
  return { bands, notes, known: true };
}

/** The envelope of a screen from what its EDID holds. What an EDID does not say (blanking, sync level) stays unknown. */
export function envelopeOfEdid(reading: EdidReading): { screen: ScreenEnvelope; notes: string[] } {
  const { bands, notes, known } = bandsAndNotes(reading);
  const interlaced = reading.timings.some(({ timing }) => timing.interlaced);
  const [aspect, syncKinds] = [aspectOf(reading), syncKindsOf(reading)];
  const maxPixelClockHz = reading.ranges?.maxPixelClockHz;
  const limits = {
    ...(interlaced ? { interlace: true } : {}),
    ...(maxPixelClockHz === undefined ? {} : { maxPixelClockHz }),
    ...(syncKinds === undefined ? {} : { syncKinds }),
    ...(aspect === undefined ? {} : { aspect }),
  };
  const named = [...(known ? (["bands"] as const) : []), ...(Object.keys(limits) as EnvelopeLimit[])];
  const sources = Object.fromEntries(named.map((limit) => [limit, "edid" satisfies LimitSource]));
  return {
    screen: {
      name: nameOf(reading),
      bands: bands.map(({ lineRateHz: line, fieldRateHz: field }) => ({ lineRateHz: line, fieldRateHz: field })),
      ...limits,
      sources,
    },
    notes: [
      ...notes,
      interlaced
        ? "One of its timings is interlaced, so it takes interlace."
        : "None of its timings is interlaced: whether it takes interlace is not known.",
      "An EDID says nothing of blanking or of sync level.",
    ],
  };
}

/** An EDID as a screen. Errors: an `EdidError`, for bytes that are no EDID. */
export function edidScreen(bytes: Uint8Array): Result<EdidScreen, EdidError> {
  const reading = parseEdid(bytes);
  if (!reading.ok) return reading;
  const { screen, notes } = envelopeOfEdid(reading.value);
  return ok({ screen, product: reading.value.product, notes, warnings: reading.value.warnings });
}
