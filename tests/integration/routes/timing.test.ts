import { describe, expect, it } from "vitest";
import { POST as edid } from "@/app/api/screens/edid/route";
import { POST as attenuate } from "@/app/api/signal/attenuator/route";
import { POST as fit } from "@/app/api/timing/fit/route";
import { POST as modeline } from "@/app/api/timing/modeline/route";
import { GET as standards } from "@/app/api/timing/standards/route";
import type { FitRouteAnswer } from "@/lib/contracts/timing";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { deviceLimits } from "@/lib/serial/limits";
import { fitsEnvelope } from "@/lib/timing/judge-envelope";
import { standardRaster } from "@/lib/timing/standards";
import { publishedDmts, publishedEdids, publishedVics, readStandard } from "@/tests/fixtures/standards/read";
import { bodyOf, call, type Call } from "@/tests/integration/routes/http";

let caller = 0;

/** Without an account, each call from an address of its own, so that the limits do not meet. */
function ask(route: Parameters<typeof call>[0], given: Call): Promise<Response> {
  caller += 1;
  return call(route, { ...given, headers: { "x-forwarded-for": `2001:db8:7:${caller}::1`, ...given.headers } });
}
const post = (route: Parameters<typeof call>[0], body: unknown) => ask(route, { method: "POST", body });

const television = { name: "television", bands: [{ lineRateHz: [15_450, 15_892], fieldRateHz: [48, 62] }] } as const;
const wish = { activeLines: 240, activePx: 1440, fieldRateHz: 60, interlaced: false, screen: television };
const plain = (text: string | undefined) => text?.replaceAll(/[\u00A0\u2009]/gu, " ");
type Problem = { status: number; code?: string; detail?: string; errors?: { path: string; message: string }[] };

describe("POST /api/timing/fit", () => {
  const fitted = async (body: object) => bodyOf<FitRouteAnswer>(await post(fit, body));

  it("gives rasters that fit, best first, the same for a driver's slug as for its limits", async () => {
    const bySlug = await fitted({ ...wish, device: "lanternfield-lf8", limit: 5 });
    expect(bySlug.fits).toHaveLength(5);
    expect(Object.keys(bySlug.fits[0] ?? {}).sort()).toEqual(
      ["fieldRateHz", "lineRateHz", "notes", "rateErrorHz", "timing"].sort(),
    );
    for (const { timing } of bySlug.fits) expect(fitsEnvelope(timing, television)).toBe(true);
    expect({ blockedBy: bySlug.blockedBy, nearest: bySlug.nearest }).toEqual({ blockedBy: [], nearest: [] });
    expect(await fitted({ ...wish, device: deviceLimits(lanternfieldLf8), limit: 5 })).toEqual(bySlug);
  });

  it("says why nothing fits, with the sum, and what comes nearest", async () => {
    // By hand: 270 + 20 = 290; 290 · 60 = 17 400; 15 892 / 290 = 54.80; ⌊15 892 / 60⌋ − 20 = 244.
    const { fits, blockedBy, nearest } = await fitted({ ...wish, activeLines: 270, keep: ["fieldRateHz"] });
    expect(fits).toEqual([]);
    expect(blockedBy).toMatchObject([{ rule: "screen.line-rate", severity: "stop", measured: 17_400, limit: 15_892 }]);
    expect(plain(blockedBy[0]?.sentence)).toContain("at its fastest they run at 54.8 Hz; at 60 Hz 244 lines fit");
    expect(nearest[0]?.changed).toEqual([{ figure: "activeLines", from: 270, to: 244, unit: "lines", kept: false }]);
  });

  it("keeps what is locked", async () => {
    const { fits } = await fitted({ ...wish, pixelClockHz: 27e6, fieldLines: 262 });
    expect(fits.length).toBeGreaterThan(0);
    for (const { timing } of fits) expect(timing).toMatchObject({ pixelClockHz: 27e6, vertical: { active: 240 } });
  });

  it.each<[string, object, number, Partial<Problem>]>([
    ["no screen", { ...wish, screen: undefined }, 400, { errors: [{ path: "screen", message: expect.any(String) }] }],
    ["no such driver", { ...wish, device: "no-such-driver" }, 422, { code: "no-driver" }],
    ["half a device", { ...wish, device: { name: "half" } }, 400, {}],
    [
      "lines below 0",
      { ...wish, activeLines: -240 },
      400,
      { errors: [{ path: "activeLines", message: expect.any(String) }] },
    ],
    [
      "half a line",
      { ...wish, activeLines: 240.5 },
      400,
      { errors: [{ path: "activeLines", message: expect.any(String) }] },
    ],
    [
      "px without end",
      { ...wish, activePx: 1e15 },
      400,
      { errors: [{ path: "activePx", message: expect.any(String) }] },
    ],
    ["a list without end", { ...wish, limit: 1e9 }, 400, { errors: [{ path: "limit", message: expect.any(String) }] }],
    [
      "crossed bands",
      { ...wish, screen: { name: "x", bands: [{ lineRateHz: [2e4, 1e4], fieldRateHz: [48, 62] }] } },
      400,
      { errors: [{ path: "screen.bands[0].lineRateHz", message: "The lower end is above the upper one." }] },
    ],
    [
      "17 bands",
      { ...wish, screen: { name: "x", bands: Array.from({ length: 17 }, () => television.bands[0]) } },
      400,
      {},
    ],
  ])("refuses %s, by path", async (_what, body, status, expected) => {
    const answer = await post(fit, body);
    expect(answer.status).toBe(status);
    expect(await bodyOf<Problem>(answer)).toMatchObject({ status, ...expected });
  });

  it("names the member of half a device that is missing", async () => {
    const { errors } = await bodyOf<Problem>(await post(fit, { ...wish, device: { name: "half" } }));
    expect(errors?.map(({ path }) => path)).toContain("device.clockHz");
  });

  it("answers a request that is made to last: how many tries it has is bounded, not how long it takes", async () => {
    const bands = Array.from({ length: 16 }, (_, index) => ({
      lineRateHz: [100 + index, 1e6 + index],
      fieldRateHz: [1, 1000],
    }));
    const screen = { name: "hostile", bands, minSyncUs: 1000, minBackPorchUs: 1000 };
    const device = {
      ...deviceLimits(lanternfieldLf8),
      numbers: {},
      clockHz: { min: 1, max: 2e10, step: 0.001 },
      maxLineTotal: 1_000_000,
      maxFieldLines: 1_000_000,
    };
    for (const [activePx, activeLines, fieldRateHz] of [
      [16, 16, 1],
      [16_000, 240, 60],
    ]) {
      const answer = await post(fit, { ...wish, activePx, activeLines, fieldRateHz, screen, device, limit: 64 });
      expect([200, 422]).toContain(answer.status);
      const { fits, blockedBy, code } = await bodyOf<Partial<FitRouteAnswer> & Problem>(answer);
      expect(fits?.length === 0 ? blockedBy?.length : code).toBeTruthy();
    }
  });

  it("is asked a few times a minute by one address, signed in or not", async () => {
    const headers = { "x-forwarded-for": "198.51.100.7" };
    const statuses = [];
    for (let asked = 0; asked < 40; asked += 1)
      statuses.push((await call(fit, { method: "POST", body: {}, headers })).status);
    expect(statuses.filter((status) => status === 400).length).toBeLessThan(40);
    expect(statuses.at(-1)).toBe(429);
  });
});

describe("POST /api/timing/modeline", () => {
  it("reads a modeline and writes it as it writes all", async () => {
    const { timing } = standardRaster("480i60");
    const written = await bodyOf<{ name: string; modeline: string }>(
      await post(modeline, { timing, name: "480 lines" }),
    );
    expect(written.name).toBe("480 lines");
    // CTA-861 code 6 as X.Org counts it: frame lines, 525 in all.
    expect(written.modeline).toBe(
      'Modeline "480 lines" 27.00 1440 1478 1602 1716 480 488 494 525 -HSync -VSync Interlace',
    );
    const read = await post(modeline, { modeline: `  ${written.modeline.replaceAll(" ", "   ")} # pasted` });
    expect(await bodyOf(read)).toEqual({ name: "480   lines", timing, modeline: expect.any(String), notes: [] });
  });

  it("comes back for every published raster", async () => {
    // Over the whole catalogue in tests/unit/timing/modeline.test.ts; here that HTTP loses nothing.
    const { timing } = standardRaster("576p50");
    const { modeline: line } = await bodyOf<{ modeline: string }>(await post(modeline, { timing }));
    expect(await bodyOf(await post(modeline, { modeline: line }))).toMatchObject({ timing, modeline: line });
  });

  it.each<[string, object, string]>([
    ["no modeline", { modeline: "" }, "modeline"],
    ["NaN", { modeline: 'Modeline "x" NaN 1 2 3 4 5 6 7 8' }, "modeline"],
    ["negatives", { modeline: 'Modeline "x" 27 -1 2 3 4 5 6 7 8' }, "modeline"],
    ["huge integers", { modeline: `Modeline "x" 27 ${"9".repeat(40)} 2 3 4 5 6 7 8` }, "modeline"],
    ["more than a line's length", { modeline: `Modeline "${"x".repeat(60_000)}" 27` }, "modeline"],
    ["a number for a modeline", { modeline: 27 }, "modeline"],
    [
      "a timing that is none",
      { timing: { ...standardRaster("240p60").timing, pixelClockHz: -1 } },
      "timing.pixelClockHz",
    ],
    [
      "a timing without polarity",
      { timing: { ...standardRaster("240p60").timing, horizontal: { active: 1 } } },
      "timing.horizontal.frontPorch",
    ],
  ])("refuses %s, by path", async (_what, body, path) => {
    const answer = await post(modeline, body);
    expect(answer.status).toBe(400);
    expect((await bodyOf<Problem>(answer)).errors?.map((error) => error.path)).toContain(path);
  });

  it("does not read a megabyte", async () => {
    expect((await post(modeline, { modeline: "1 ".repeat(500_000) })).status).toBe(413);
  });
});

describe("GET /api/timing/standards", () => {
  type Entry = {
    id: string;
    name: string;
    document: string;
    code?: number;
    timing: { vertical: { active: number } };
    fieldRateHz: number;
  };
  const search = async (query: string) => {
    const answer = await ask(standards, { path: `/api/timing/standards${query}` });
    return (await bodyOf<{ items: Entry[]; nextCursor: null }>(answer)).items;
  };

  it("has every published entry, each with its document and number", async () => {
    const items = await search("");
    const codes = (document: string) =>
      new Set(items.filter((item) => item.document === document).map(({ code }) => code));
    expect([...codes("CTA-861")]).toEqual(expect.arrayContaining(publishedVics().map(([code]) => code)));
    expect([...codes("VESA DMT")]).toEqual(expect.arrayContaining(publishedDmts().map(([code]) => code)));
    expect(items.some(({ document }) => document.startsWith("ITU-R"))).toBe(true);
  });

  it("finds by lines, rate and words", async () => {
    const items = await search("?lines=240&rate=60&text=cta");
    expect(items.map(({ id }) => id)).toEqual(expect.arrayContaining(["cta-861-8", "cta-861-8-263", "cta-861-6"]));
    for (const item of items) {
      expect(item.document).toBe("CTA-861");
      expect(item.timing.vertical.active).toBe(240);
      expect(Math.abs(item.fieldRateHz - 60)).toBeLessThanOrEqual(0.5);
    }
    expect(await search("?text=no-such-thing")).toEqual([]);
  });

  it.each([
    "?lines=",
    "?lines=-1",
    "?lines=2.5",
    "?rate=NaN",
    "?rate=1e9",
    "?lines=1&lines=2",
    `?text=${"x".repeat(300)}`,
  ])("refuses %s", async (query) => {
    expect((await ask(standards, { path: `/api/timing/standards${query}` })).status).toBe(400);
  });
});

describe("POST /api/screens/edid", () => {
  const send = (bytes: Uint8Array, type?: string) =>
    ask(edid, {
      method: "POST",
      bytes: Uint8Array.from(bytes),
      ...(type === undefined ? {} : { headers: { "content-type": type } }),
    });
  // Source: tests/fixtures/standards/edid-ranges.json, as edid-decode prints them.
  const { files } = readStandard<{
    files: Record<string, { vmin: number; vmax: number; hmin_khz: number; hmax_khz: number; maxpclk_mhz: number }>;
  }>("edid-ranges.json");
  const [first] = publishedEdids();
  if (first === undefined) throw new Error("no EDID");

  it("gives the screen that every published EDID describes", async () => {
    for (const [file, bytes] of publishedEdids()) {
      const published = files[file];
      if (published === undefined) throw new Error(file);
      expect(await bodyOf(await send(bytes))).toMatchObject({
        screen: {
          bands: [
            {
              lineRateHz: [published.hmin_khz * 1000, published.hmax_khz * 1000],
              fieldRateHz: [published.vmin, published.vmax],
            },
          ],
          maxPixelClockHz: published.maxpclk_mhz * 1e6,
          sources: { bands: "edid" },
        },
        product: { maker: expect.stringMatching(/^[A-Z?]{3}$/u) },
        warnings: expect.any(Array),
      });
    }
  });

  it("refuses what is no EDID with a word for it, and other types", async () => {
    const broken = Uint8Array.from(first[1]);
    broken[127] = (broken[127] ?? 0) ^ 1;
    for (const [bytes, code] of [
      [new Uint8Array(0), "too-short"],
      [first[1].subarray(0, 100), "too-short"],
      [new Uint8Array(128), "header"],
      [broken, "checksum"],
    ] as const) {
      const answer = await send(bytes);
      expect(answer.status).toBe(422);
      expect(await bodyOf<Problem>(answer)).toMatchObject({ code, detail: expect.any(String) });
    }
    expect((await send(first[1], "application/json")).status).toBe(415);
  });

  it("reads 255 extensions, and not a byte more", async () => {
    const most = new Uint8Array(256 * 128);
    most.set(first[1].subarray(0, 126));
    most[126] = 255;
    most[127] = (256 - (most.subarray(0, 127).reduce((sum, byte) => sum + byte, 0) % 256)) % 256;
    expect((await send(most)).status).toBe(200);
    expect((await send(new Uint8Array(256 * 128 + 1))).status).toBe(413);
  });
});

describe("POST /api/signal/attenuator", () => {
  it("gives the resistor and the E24 values about it from a source's level and impedance", async () => {
    // By hand: 75 · 4 / 0.3 − 75 − 75 = 850; IEC 60063 has 820 and 910 Ω; 4 · 75 / (75 + 820 + 75) = 0.309.
    const answer = await bodyOf<{ seriesOhm: number; e24: { ohm: number; resultVpp: number }[]; caution: string }>(
      await post(attenuate, { sourceVpp: 4, sourceOhm: 75, loadOhm: 75, targetVpp: 0.3 }),
    );
    expect(answer.seriesOhm).toBeCloseTo(850, 9);
    expect(answer.e24.map(({ ohm }) => ohm)).toEqual([820, 910]);
    expect(answer.e24[0]?.resultVpp).toBeCloseTo(0.3093, 4);
    expect(answer.caution).not.toBe("");
  });

  it("finds the source from two readings", async () => {
    // By hand: 4 V behind 75 Ω gives 4 · 75 / 150 = 2 V direct and 4 · 75 / 300 = 1 V behind 150 Ω more.
    const measured = [
      { seriesOhm: 0, vpp: 2 },
      { seriesOhm: 150, vpp: 1 },
    ];
    const answer = await bodyOf<{ sourceVpp: number; sourceOhm: number }>(
      await post(attenuate, { measured, loadOhm: 75, targetVpp: 0.3 }),
    );
    expect(answer.sourceVpp).toBeCloseTo(4, 9);
    expect(answer.sourceOhm).toBeCloseTo(75, 9);
  });

  it("says where only an amplifier helps", async () => {
    const answer = await post(attenuate, { sourceVpp: 0.4, sourceOhm: 75, loadOhm: 75, targetVpp: 0.3 });
    expect(await bodyOf(answer)).toMatchObject({ outcome: "too-weak", seriesOhm: 0, e24: [] });
  });

  it.each<[string, object, string]>([
    ["a level of 0", { sourceVpp: 0, sourceOhm: 75, loadOhm: 75, targetVpp: 0.3 }, "sourceVpp"],
    ["a load below 0", { sourceVpp: 4, sourceOhm: 75, loadOhm: -75, targetVpp: 0.3 }, "loadOhm"],
    ["no target", { sourceVpp: 4, sourceOhm: 75, loadOhm: 75 }, "targetVpp"],
    ["one reading", { measured: [{ seriesOhm: 0, vpp: 2 }], loadOhm: 75, targetVpp: 0.3 }, "measured"],
    [
      "two readings alike",
      {
        measured: [
          { seriesOhm: 0, vpp: 2 },
          { seriesOhm: 0, vpp: 2 },
        ],
        loadOhm: 75,
        targetVpp: 0.3,
      },
      "measured",
    ],
  ])("refuses %s, by path", async (_what, body, path) => {
    const answer = await post(attenuate, body);
    expect(answer.status).toBe(400);
    expect((await bodyOf<Problem>(answer)).errors?.[0]?.path).toBe(path);
  });
});
