import { describe, expect, it } from "vitest";
import { POST as check } from "@/app/api/profiles/check/route";
import { POST as compare } from "@/app/api/profiles/compare/route";
import { POST as convert } from "@/app/api/profiles/convert/route";
import { POST as describeTiming } from "@/app/api/timing/describe/route";
import { demoScreens } from "@/db/demo/screens";
import { demoProfiles } from "@/db/demo/seed-profiles";
import type { Finding } from "@/lib/profile/finding";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { deviceLimits } from "@/lib/serial/limits";
import { standardNames, standardRaster } from "@/lib/timing/standards";
import { bodyOf, call } from "@/tests/integration/routes/http";

let caller = 0;

/** Without an account, each call from an address of its own, so that the limits do not meet. */
function post(route: Parameters<typeof call>[0], body: unknown, path?: string): Promise<Response> {
  caller += 1;
  return call(route, { method: "POST", body, path, headers: { "x-forwarded-for": `203.0.113.${caller}` } });
}

const cabinet = demoScreens.find(({ key }) => key === "cabinet-a")?.envelope;
const last = (key: string) => demoProfiles.find((one) => one.key === key)?.revisions.at(-1)?.document;

describe("the computing routes, without an account", () => {
  it("describe a raster in figures", async () => {
    const answer = await post(describeTiming, { timing: standardRaster("480i60").timing });
    // CTA-861, VIC 6 and 7: 1 716 clocks, 525 lines in a frame, 15.734 kHz, 59.94 Hz.
    expect(await bodyOf(answer)).toMatchObject({ lineTotal: 1716, frameLines: 525, fieldLines: 262, findings: [] });
    const { lineRateHz, fieldRateHz } = await bodyOf<Record<string, number>>(
      await post(describeTiming, { timing: standardRaster("480i60").timing }),
    );
    expect(lineRateHz).toBeCloseTo(15_734.266, 3);
    expect(fieldRateHz).toBeCloseTo(59.94, 2);
  });

  it("find nothing to say against a standard's own raster", async () => {
    for (const name of standardNames) {
      const answer = await post(describeTiming, { timing: standardRaster(name).timing });
      expect([name, (await bodyOf<{ findings: Finding[] }>(answer)).findings]).toEqual([name, []]);
    }
  });

  it("say what a screen makes of a raster", async () => {
    const answer = await post(describeTiming, { timing: standardRaster("480p60").timing, screen: cabinet });
    const { findings } = await bodyOf<{ findings: Finding[] }>(answer);
    expect(findings.find(({ rule }) => rule === "screen.line-rate")).toMatchObject({
      severity: "stop",
      path: "modes[raster].timing",
    });
  });

  it("refuse a timing that is no raster, by its path", async () => {
    const { timing } = standardRaster("240p60");
    const answer = await post(describeTiming, {
      timing: { ...timing, horizontal: { ...timing.horizontal, active: -1 } },
    });
    expect(answer.status).toBe(400);
    expect(await bodyOf(answer)).toMatchObject({ errors: [{ path: "timing.horizontal.active" }] });
  });

  it("check a document against a driver by its slug as against its limits", async () => {
    const body = { document: last("too-tall"), screen: cabinet };
    const bySlug = await bodyOf<{ ok: boolean; findings: Finding[] }>(
      await post(check, { ...body, device: "lanternfield-lf8" }),
    );
    const byLimits = await bodyOf(await post(check, { ...body, device: deviceLimits(lanternfieldLf8) }));
    expect(byLimits).toEqual({ ok: bySlug.ok, findings: bySlug.findings, ...{} });
    expect(bySlug.ok).toBe(false);
    expect(bySlug.findings.map(({ rule }) => rule)).toContain("placement.vertical");
    expect((await post(check, { ...body, device: "no-such-driver" })).status).toBe(422);
    const unnamed = await post(check, {
      ...body,
      unchanged: { slots: [1, 4], modes: ["a"] },
      device: "lanternfield-lf8",
    });
    expect(await bodyOf(unnamed)).toMatchObject({ ok: true });
  });

  it("compare two documents", async () => {
    const revisions = demoProfiles.find(({ key }) => key === "upright-240")?.revisions ?? [];
    const answer = await post(compare, { left: revisions[0]?.document, right: revisions[1]?.document });
    const { changes } = await bodyOf<{ changes: { path: string; left: unknown; right: unknown; unit: string }[] }>(
      answer,
    );
    expect(changes).toContainEqual({ path: "slots[1].placement.heightPct", left: 100, right: 97.6, unit: "%" });
  });

  it("convert a document to its byte-stable form", async () => {
    const document = last("upright-240");
    const reversed = Object.fromEntries(Object.entries(document ?? {}).reverse());
    const [one, two] = [await post(convert, document, "/x?to=json"), await post(convert, reversed, "/x?to=json")];
    const text = await one.text();
    expect(await two.text()).toBe(text);
    expect(JSON.parse(text)).toEqual(document);
    expect((await post(convert, { format: "other" }, "/x?to=json")).status).toBe(422);
    expect((await post(convert, document, "/x?to=pdf")).status).toBe(400);
  });

  it("answer nonsense with the right problem", async () => {
    const send = (text: string, type = "application/json") => {
      caller += 1;
      return call(check, {
        method: "POST",
        text,
        headers: { "x-forwarded-for": `203.0.113.${caller}`, "content-type": type },
      });
    };
    expect((await send("{")).status).toBe(400);
    expect((await send("null")).status).toBe(400);
    expect((await send("{}", "text/plain")).status).toBe(415);
    expect((await send(`${"[".repeat(65)}${"]".repeat(65)}`)).status).toBe(400);
    expect((await send(`{"document":"${"x".repeat(1_200_000)}"}`)).status).toBe(413);
    const problem = await send('{"document":{"format":"backporch-profile","version":1,"slots":[{"number":1.5}]}}');
    expect(problem.headers.get("content-type")).toBe("application/problem+json");
    expect(await bodyOf(problem)).toMatchObject({ status: 400, errors: [{ path: "document.slots[0].number" }] });
  });

  it("stop answering an address that asks too often, and say when to come back", async () => {
    const headers = { "x-forwarded-for": "198.51.100.99" };
    let answered = 0;
    let answer = await call(compare, { method: "POST", body: {}, headers });
    // 60 at once, and one more for each second that they take.
    for (; answer.status !== 429 && answered < 300; answered += 1) {
      expect(answer.status).toBe(400);
      answer = await call(compare, { method: "POST", body: {}, headers });
    }
    expect(answered).toBeGreaterThanOrEqual(60);
    expect(answer.status).toBe(429);
    expect(Number(answer.headers.get("retry-after"))).toBeGreaterThan(0);
  });
});
