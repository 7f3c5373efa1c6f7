import { describe, expect, it } from "vitest";
import { createModesStore } from "@/components/modes/store/modes-store";
import { DEFAULT_CHOICES } from "@/components/modes/store/choices";
import { deviceBySlug } from "@/components/modes/store/link";
import { fieldRateHz, lineRateHz, lineTotal } from "@/lib/timing/rates";
import { standardRaster } from "@/lib/timing/standards";
import { choicesOnLf8 } from "@/tests/unit/modes/samples";

const at = (change = {}) => createModesStore(choicesOnLf8(change));
const wish270 = { ...DEFAULT_CHOICES.wish, activeLines: 270 };

function handOf({ store }: ReturnType<typeof at>) {
  const hand = store.getState().answer?.hand;
  if (!hand) throw new Error("No raster is in hand");
  return hand;
}

describe("a wish", () => {
  it("has the best raster that fits in hand, and the others beside it", () => {
    const page = at();
    const { answer } = page.store.getState();
    expect(answer?.candidates.length).toBeGreaterThan(1);
    expect(handOf(page)).toBe(answer?.candidates[0]);
    expect(answer?.candidates.every(({ kind }) => kind === "fits")).toBe(true);
    // CTA-861 code 8 is 240 lines at 60.054 Hz: it stands among them with its document.
    expect(answer?.candidates.map(({ standard }) => standard)).toContain("cta-861-8");
  });

  it("that fits nowhere says why with figures, and has the nearest in hand", () => {
    const page = at({ wish: wish270, keep: ["fieldRateHz"] });
    const { answer } = page.store.getState();
    expect(answer?.outcome.fits).toEqual([]);
    // 290 lines at 60 Hz are 17.40 kHz by arithmetic; the preset's band ends at 15.892 kHz.
    const lineRate = answer?.outcome.blockedBy.find(({ constraint }) => constraint === "screen-line-rate");
    expect(lineRate).toMatchObject({ needed: 17_400, limit: 15_892, totalLines: 290 });
    expect(handOf(page).kind).toBe("nearest");
    expect(handOf(page).changed.some(({ kept }) => kept)).toBe(false);
  });

  it("is looked for anew with each figure that is typed, and says what else changed", () => {
    const page = at();
    const before = handOf(page).timing;
    page.acts.turn("activeLines", 244);
    const { choices, note } = page.store.getState();
    expect(choices.wish.activeLines).toBe(244);
    expect(handOf(page).timing.vertical.active).toBe(244);
    expect(note?.figure).toBe("activeLines");
    expect(note?.others.map(({ figure }) => figure)).not.toContain("activeLines");
    page.acts.undo();
    expect(handOf(page).timing).toEqual(before);
  });

  it("keeps a clock that was typed, in every raster that it offers", () => {
    const page = at();
    page.acts.turn("pixelClockHz", 27e6);
    const { answer } = page.store.getState();
    expect(answer?.outcome.fits.length).toBeGreaterThan(0);
    expect(answer?.outcome.fits.every(({ timing }) => timing.pixelClockHz === 27e6)).toBe(true);
    page.acts.keep("pixelClockHz", false);
    expect(page.store.getState().choices.stated).toEqual({});
  });

  it("does not take a figure that no raster has, and leaves everything as it was", () => {
    const page = at();
    const before = page.store.getState();
    page.acts.turn("activeLines", 2);
    const after = page.store.getState();
    expect(after.choices).toBe(before.choices);
    expect(after.answer).toBe(before.answer);
    expect(after.errors.activeLines).toMatch(/whole number from 16/u);
    page.acts.letGo();
    expect(page.store.getState().errors).toEqual({});
  });

  it("of an interlaced scan has twice the lines, of which a field has half", () => {
    const page = at();
    page.acts.scan(true);
    expect(page.store.getState().choices.wish.activeLines).toBe(480);
    expect(handOf(page).timing).toMatchObject({ interlaced: true, vertical: { active: 240 } });
    page.acts.scan(false);
    expect(page.store.getState().choices.wish.activeLines).toBe(240);
  });
});

describe("a raster changed by hand", () => {
  const standard = standardRaster("240p60").timing;

  it("moves the sync with the front porch and keeps both totals and the picture", () => {
    const page = at({ raster: standard });
    page.acts.turn("horizontal.frontPorch", 48);
    const hand = handOf(page);
    expect(hand.kind).toBe("hand");
    expect(hand.timing.horizontal).toMatchObject({ frontPorch: 48, sync: 124, backPorch: 104, active: 1440 });
    expect(lineTotal(hand.timing)).toBe(lineTotal(standard));
  });

  it("moves the border of the picture where it is dragged, and the line grows", () => {
    const page = at({ raster: standard });
    page.acts.turn("horizontal.backPorch", 120, true);
    expect(handOf(page).timing.horizontal).toMatchObject({ frontPorch: 38, sync: 124, backPorch: 120 });
    expect(lineTotal(handOf(page).timing)).toBe(lineTotal(standard) + 6);
    // The clock follows, so that the line rate holds to within half a step of it: 25 kHz of 27 MHz.
    expect(Math.abs(lineRateHz(handOf(page).timing) / lineRateHz(standard) - 1)).toBeLessThanOrEqual(25e3 / 27e6);
  });

  it("drags from where the border was taken hold of: there and back changes nothing", () => {
    const page = at({ raster: standard });
    page.acts.hold("horizontal.sync");
    for (const count of [130, 160, 90, 124]) page.acts.turn("horizontal.sync", count);
    page.acts.letGo();
    expect(handOf(page).timing).toEqual(standard);
  });

  it("refuses what something kept stands against, by name, and does it once that is let go", () => {
    const page = at({ raster: standard, byHand: true });
    page.acts.keep("horizontal.frontPorch", true);
    page.acts.keep("horizontal.backPorch", true);
    page.acts.keep("lineTotal", true);
    page.acts.turn("horizontal.sync", 130);
    const { refusal } = page.store.getState();
    expect(refusal?.by).toEqual(["lineTotal"]);
    expect(handOf(page).timing).toEqual(standard);
    if (refusal === null) throw new Error("It was refused");
    page.acts.letGoAndTurn(refusal);
    expect(handOf(page).timing.horizontal.sync).toBe(130);
    expect(page.store.getState().refusal).toBeNull();
  });

  it("stays in hand while another screen is chosen, and goes for the best candidate on demand", () => {
    const page = at({ raster: standard });
    page.acts.turn("vertical.frontPorch", 5);
    const made = handOf(page).timing;
    page.acts.chooseDevice(deviceBySlug("ternwick-16") ?? null);
    expect(handOf(page).timing).toEqual(made);
    page.acts.backToBest();
    expect(handOf(page).kind).toBe("fits");
  });
});

describe("a screen", () => {
  const own = {
    id: "own",
    envelope: { name: "Wide CRT", bands: [{ lineRateHz: [15_450, 15_892] as const, fieldRateHz: [48, 62] as const }] },
  };

  it("that is only known better now leaves the raster that was picked; another one does not", () => {
    const page = at();
    const second = page.store.getState().answer?.candidates[1];
    if (second === undefined) throw new Error("There is more than one");
    page.acts.pick(second.timing);
    page.acts.updateScreen(own);
    expect(handOf(page).timing).toEqual(second.timing);
    page.acts.chooseScreen(own);
    expect(handOf(page)).toBe(page.store.getState().answer?.candidates[0]);
  });

  it("whose bands are crossed is not taken, and the page says why", () => {
    const page = at();
    const before = page.store.getState().choices;
    page.acts.chooseScreen({
      id: "bad",
      envelope: { name: "Bad", bands: [{ lineRateHz: [16_000, 15_000], fieldRateHz: [48, 62] }] },
    });
    expect(page.store.getState().choices).toBe(before);
    expect(Object.values(page.store.getState().errors)).toEqual(["The lower end is above the upper one."]);
  });
});

describe("the findings", () => {
  it("name the envelope's limit and source, and what was not known", () => {
    const page = at({ raster: standardRaster("480p60").timing, byHand: true });
    const stop = page.store.getState().answer?.findings.find(({ rule }) => rule === "screen.line-rate");
    // CTA-861 codes 2 and 3: 27 MHz by 858 clocks are 31.469 kHz.
    expect(stop).toMatchObject({ severity: "stop", limitSource: "standard" });
    expect(stop?.measured).toBeCloseTo(31_468.53, 1);
    expect(page.store.getState().answer?.findings.some(({ rule }) => rule === "unknown.screen")).toBe(true);
  });

  it("offer clocks that close the slip, which then is smaller", () => {
    const page = at({ raster: standardRaster("240p60").timing });
    const slipOf = () => page.store.getState().answer?.findings.find(({ rule }) => rule === "rate.slip");
    const before = slipOf();
    // 60.0545 Hz out, 60 Hz in: a frame repeats every 1 / 0.0545 = 18.4 s.
    expect(before?.measured).toBeCloseTo(18.37, 2);
    const [cure] = before?.remedies ?? [];
    if (cure === undefined) throw new Error("There is a cure");
    page.acts.takeRemedy(cure);
    const after = slipOf();
    expect(Number(after?.measured ?? Infinity)).toBeGreaterThan(Number(before?.measured));
  });

  it("say nothing of slip where the output follows the input, and the refresh is the source's", () => {
    const device = deviceBySlug("ternwick-16");
    const page = at({
      device: device ?? null,
      source: { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 59.94 },
    });
    expect(page.store.getState().answer?.findings.some(({ rule }) => rule === "rate.slip")).toBe(false);
    expect(fieldRateHz(handOf(page).timing)).toBeCloseTo(59.94, 3);
  });
});
