import { z } from "zod";
import { screenEnvelopeSchema } from "@/lib/profile/document";
import { findShippedDriver } from "@/lib/serial/drivers/shipped";
import { deviceLimits } from "@/lib/serial/limits";
import type { ScreenEnvelope } from "@/lib/timing/envelope";
import { envelopeProblems } from "@/lib/timing/envelope-problems";
import { requestProblems } from "@/lib/timing/fit/request-problems";
import type { SourceFormat } from "@/lib/timing/raster";
import { rasterFromText, rasterToText } from "@/lib/timing/raster-text";
import { screenPresets } from "@/lib/timing/screen-presets";
import { requestOf } from "@/components/modes/store/answer";
import {
  DEFAULT_CHOICES,
  isPart,
  PARTS,
  STATED,
  WISHED,
  type KeptFigure,
  type ModesChoices,
  type ModesDevice,
  type StatedFigure,
} from "@/components/modes/store/choices";
import { figureWords } from "@/components/modes/store/figure-words";

/** The query of an address, as Next gives it or as `URLSearchParams` does. */
export type ModesQuery = Readonly<Record<string, string | readonly string[] | undefined>>;

export type LinkRead = {
  readonly choices: ModesChoices;
  /** What could not be taken, a sentence each; a value that always works stands in. */
  readonly problems: readonly string[];
};

const ANY = "any";
const NOTHING = "none";

const number = z
  .string()
  .max(20)
  .regex(/^\d+(?:\.\d+)?$/u)
  .transform(Number)
  .pipe(z.number().positive().finite());
const scan = z.enum(["progressive", "interlaced"]);
const sourceText = z
  .string()
  .max(40)
  .regex(/^\d{1,5}x\d{1,5}[pi]\d{1,3}(?:\.\d{1,4})?$/u);

/** "1920x1080p60", "720x480i59.94" */
export function sourceToText({ activePx, activeLines, interlaced, fieldRateHz }: SourceFormat): string {
  return `${activePx}x${activeLines}${interlaced ? "i" : "p"}${Number(fieldRateHz.toFixed(4))}`;
}

/** Reads a source format; undefined where it is none. */
export function sourceFromText(text: string): SourceFormat | undefined {
  if (!sourceText.safeParse(text).success) return undefined;
  const [, px, lines, letter, rate] = /^(\d+)x(\d+)([pi])([\d.]+)$/u.exec(text) ?? [];
  const format = {
    activePx: Number(px),
    activeLines: Number(lines),
    interlaced: letter === "i",
    fieldRateHz: Number(rate),
  };
  return format.activePx > 0 && format.activeLines > 0 && format.fieldRateHz > 0 ? format : undefined;
}

/** A device by the slug of its driver. */
export function deviceBySlug(slug: string): ModesDevice | undefined {
  const driver = findShippedDriver(slug);
  return driver === undefined ? undefined : { slug, limits: deviceLimits(driver) };
}

const keptKeys: Readonly<Record<KeptFigure, string>> = {
  ...Object.fromEntries([...WISHED, ...PARTS].map((figure) => [figure, figureWords[figure].key])),
  interlaced: "scan",
  // The cast holds: every kept figure is one of the two lists or the scan.
} as Record<KeptFigure, string>;

/** An envelope in an address: an owner's screen is nobody else's to look up. */
function envelopeText(envelope: ScreenEnvelope): string {
  const { name, bands, interlace, maxPixelClockHz, minSyncUs, minBackPorchUs, minFieldBlankUs } = envelope;
  return JSON.stringify({ name, bands, interlace, maxPixelClockHz, minSyncUs, minBackPorchUs, minFieldBlankUs });
}

/** The address's query that leads back to the same page. */
export function toQuery(choices: ModesChoices): string {
  const { wish, stated, keep, raster, byHand, screen, device, source } = choices;
  const query = new URLSearchParams();
  for (const figure of WISHED) query.set(figureWords[figure].key, String(wish[figure]));
  query.set("scan", wish.interlaced ? "interlaced" : "progressive");
  for (const figure of STATED) {
    const value = stated[figure];
    const { key, scale } = figureWords[figure];
    if (value !== undefined) query.set(key, String(Number((value / scale).toFixed(9))));
  }
  if (keep.length > 0) query.set("keep", keep.map((figure) => keptKeys[figure]).join("."));
  query.set("screen", screen.id);
  query.set("source", source === null ? NOTHING : sourceToText(source));
  query.set("device", device?.slug ?? ANY);
  if (raster !== null) query.set("raster", rasterToText(raster));
  if (raster !== null && byHand) query.set("made", "hand");
  const isPreset = screenPresets.some(({ id }) => id === screen.id);
  if (!isPreset && screen.envelope !== null) query.set("limits", envelopeText(screen.envelope));
  return query.toString();
}

/** Reads one value of the query after another, and remembers what could not be taken. */
class Reader {
  readonly problems: string[] = [];
  constructor(private readonly query: ModesQuery) {}

  text(key: string): string | undefined {
    const value = this.query[key];
    return typeof value === "string" ? value : value?.[0];
  }

  /** Undefined where the key is missing, or its value is not taken. */
  take<T>(key: string, read: (text: string) => T | undefined, standsIn: string): T | undefined {
    const text = this.text(key);
    if (text === undefined) return undefined;
    const value = read(text);
    if (value === undefined) this.problems.push(`“${key}” of the link can't be read: ${standsIn}.`);
    return value;
  }
}

const parsed =
  <T>(shape: z.ZodType<T, string>) =>
  (text: string): T | undefined =>
    shape.safeParse(text).data;

function keptOf(text: string): KeptFigure[] | undefined {
  const names = Object.entries(keptKeys) as [KeptFigure, string][];
  const found = text.split(".").map((key) => names.find(([, name]) => name === key)?.[0]);
  const known = found.filter((figure) => figure !== undefined);
  return known.length === found.length ? [...new Set(known)] : undefined;
}

function envelopeOf(text: string): ScreenEnvelope | undefined {
  // A JSON text that is none is an expected address, not a fault of ours.
  const read = z
    .string()
    .max(4000)
    .transform((json, context) => {
      try {
        return JSON.parse(json) as unknown;
      } catch (error) {
        if (!(error instanceof SyntaxError)) throw error;
        context.addIssue({ code: "custom", message: "is no JSON" });
        return z.NEVER;
      }
    })
    .pipe(screenEnvelopeSchema)
    .safeParse(text).data;
  return read !== undefined && envelopeProblems(read).length === 0 ? read : undefined;
}

function screenOf(reader: Reader): ModesChoices["screen"] {
  const id = reader.text("screen");
  if (id === undefined) return DEFAULT_CHOICES.screen;
  const preset = screenPresets.find((one) => one.id === id);
  if (preset !== undefined) return { id, envelope: preset.envelope };
  const limits = reader.take("limits", envelopeOf, "the screen is looked for among yours");
  if (limits !== undefined && id.length <= 64) return { id, envelope: limits };
  if (z.uuid().safeParse(id).success) return { id, envelope: null };
  reader.problems.push("The screen of the link is not known: a 525-line television stands in.");
  return DEFAULT_CHOICES.screen;
}

/** Figures that no raster has, said as sentences; without them the page can be answered. */
function sound(choices: ModesChoices): LinkRead {
  const television = DEFAULT_CHOICES.screen;
  const request = requestOf({ ...choices, screen: choices.screen.envelope === null ? television : choices.screen });
  const problems = request === null ? [] : requestProblems(request);
  if (problems.length === 0) return { choices, problems: [] };
  return {
    choices: { ...choices, wish: DEFAULT_CHOICES.wish, stated: {} },
    problems: problems.map(
      ({ path, message }) => `The figures of the link can't be used (${path}: ${message}) The usual ones stand in.`,
    ),
  };
}

/** The page that an address asks for. Whatever is wrong with it falls back, and is said. */
export function fromQuery(query: ModesQuery): LinkRead {
  const reader = new Reader(query);
  const usual = "the usual figure stands in";
  const wish = { ...DEFAULT_CHOICES.wish };
  for (const figure of WISHED)
    wish[figure] = reader.take(figureWords[figure].key, parsed(number), usual) ?? wish[figure];
  wish.interlaced = reader.take("scan", parsed(scan), "progressive stands in") === "interlaced";
  const stated: Partial<Record<StatedFigure, number>> = {};
  for (const figure of STATED) {
    const { key, scale } = figureWords[figure];
    const value = reader.take(key, parsed(number), "it is left open");
    if (value !== undefined) stated[figure] = Math.round(value * scale * 1e6) / 1e6;
  }
  const keep = reader.take("keep", keptOf, "nothing is kept") ?? [];
  const raster = reader.take("raster", rasterFromText, "the best one stands in") ?? null;
  const screen = screenOf(reader);
  const source =
    reader.text("source") === NOTHING
      ? null
      : (reader.take("source", sourceFromText, "1080 lines at 60 Hz stand in") ?? DEFAULT_CHOICES.source);
  const slug = reader.text("device");
  const device =
    slug === undefined || slug === ANY ? null : (reader.take("device", deviceBySlug, "any device stands in") ?? null);
  const byHand = raster !== null && (reader.text("made") === "hand" || keep.some(isPart));
  const read = sound({ wish, stated, keep, raster, byHand, screen, device, source });
  return { choices: read.choices, problems: [...reader.problems, ...read.problems] };
}
