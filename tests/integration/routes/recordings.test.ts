import { beforeAll, describe, expect, it } from "vitest";
import { POST as postConformance } from "@/app/api/conformance/route";
import { PUT as putAnswer } from "@/app/api/driver-questions/[id]/answer/route";
import { GET as listQuestions, POST as postQuestion } from "@/app/api/drivers/[slug]/questions/route";
import { POST as postVersion } from "@/app/api/drivers/[slug]/versions/route";
import { GET as getFile } from "@/app/api/recordings/[id]/file/route";
import { DELETE as deleteRecording, GET as getRecording } from "@/app/api/recordings/[id]/route";
import { GET as listRecordings, POST as postRecording } from "@/app/api/recordings/route";
import { simulateRecording } from "@/db/demo/simulate-recording";
import type { ConformanceDetail } from "@/lib/contracts/conformance";
import type { Page } from "@/lib/contracts/page";
import type { QuestionView, RecordingView } from "@/lib/contracts/recording";
import { parseRecording } from "@/lib/serial/recording";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { printable } from "@/lib/serial/wire-log";
import { bodyOf, call } from "@/tests/integration/routes/http";
import { person } from "@/tests/integration/routes/people";
import type { Person } from "@/tests/integration/routes/people";
import { compiled } from "@/tests/unit/serial/simulated-rig";
import { smallDrivers } from "@/tests/unit/serial/small-drivers";

/** The smallest of the shipped ones, with two slots and two modes, under a name of its own. */
const small = smallDrivers.find(({ slug }) => slug === "brackenrow-4r");
if (small === undefined) throw new Error("a shipped driver is gone");
const definition = (version: string, more: object = {}) => ({
  ...small,
  maker: "Testing",
  model: "One",
  slug: "testing-one",
  version,
  ...more,
});

let maintainer: Person;
let owner: Person;
let other: Person;

beforeAll(async () => {
  [maintainer, owner, other] = [await person("maintainer"), await person(), await person()];
});

const as = (who: Person, more: object = {}) => ({ cookie: who.cookie, ...more });
const post = (who: Person, more: object = {}) => ({ method: "POST", cookie: who.cookie, ...more });

/** All that was sent in a recording's file, as printable text. */
function said(file: string): string {
  const parsed = parseRecording(file);
  if (!parsed.ok) throw new Error(parsed.error[0]?.message);
  return parsed.value.lines.map((line) => (line.direction === "event" ? "" : printable(line.bytes))).join("\n");
}

describe("recordings", { timeout: 300_000 }, () => {
  const state = { values: {}, serialNumber: "QZ-7731-88", firmware: "2.0", activeSlot: 1, source: null };
  let text = "";

  beforeAll(async () => {
    const values = { "slots[1].name": "SECRET" };
    text = await simulateRecording(compiled(smallDrivers[0] ?? lanternfieldLf8), {
      ...state,
      values,
      at: "2026-05-05T10:00:00Z",
      slots: [1],
      strikeOut: false,
    });
    expect(said(text)).toContain("SECRET");
    expect(said(text)).toContain("QZ-7731-88");
  });

  const upload = (who: Person, path: string, body: string) =>
    call(
      postRecording,
      post(who, { path: `/x?${path}`, text: body, headers: { "content-type": "application/x-ndjson" } }),
    );

  it("are the owner's alone until one is attached to a question, and then the maintainers' too", async () => {
    const made = await upload(owner, "name=Evening&strikeOut=true", text);
    expect(made.status).toBe(201);
    const view = await bodyOf<RecordingView>(made);
    expect(view).toMatchObject({
      name: "Evening",
      struckOut: true,
      mine: true,
      questions: 0,
      driver: { slug: "lanternfield-lf8", version: "1.0.0" },
      startedAt: "2026-05-05T10:00:00.000Z",
    });
    const file = await call(getFile, as(owner, { params: { id: view.id } }));
    expect(file.headers.get("content-disposition")).toBe('attachment; filename="evening.jsonl"');
    const stored = await file.text();
    for (const secret of ["SECRET", "QZ-7731"]) expect(said(stored)).not.toContain(secret);
    const parsed = parseRecording(stored);
    expect(parsed.ok && [parsed.value.head.struckOut, parsed.value.lines.length]).toEqual([true, view.lines]);
    const sees = async (who: Person) => [
      (await call(getRecording, as(who, { params: { id: view.id } }))).status,
      (await call(getFile, as(who, { params: { id: view.id } }))).status,
      (await bodyOf<Page<RecordingView>>(await call(listRecordings, as(who)))).items.length,
    ];
    expect([await sees(maintainer), await sees(other)]).toEqual([
      [404, 404, 0],
      [404, 404, 0],
    ]);
    const params = { slug: "lanternfield-lf8" };
    expect(
      (await call(postQuestion, post(other, { params, body: { text: "Theirs?", recordingId: view.id } }))).status,
    ).toBe(422);
    const asked = await bodyOf<QuestionView>(
      await call(postQuestion, post(owner, { params, body: { text: "Why?", recordingId: view.id } })),
    );
    expect(asked).toMatchObject({ recording: { id: view.id, name: "Evening" }, answer: null });
    expect([await sees(maintainer), await sees(other)]).toEqual([
      [200, 200, 1],
      [404, 404, 0],
    ]);
    expect((await bodyOf<Page<QuestionView>>(await call(listQuestions, as(other, { params })))).items).toEqual([]);
    const answered = await call(putAnswer, {
      method: "PUT",
      ...as(maintainer, { params: { id: asked.id }, body: { text: "Because." } }),
    });
    expect(await bodyOf<QuestionView>(answered)).toMatchObject({ answer: { text: "Because.", by: maintainer.name } });
    expect(
      (await call(deleteRecording, { method: "DELETE", ...as(maintainer, { params: { id: view.id } }) })).status,
    ).toBe(404);
    expect((await call(deleteRecording, { method: "DELETE", ...as(owner, { params: { id: view.id } }) })).status).toBe(
      204,
    );
    expect(await sees(maintainer)).toEqual([404, 404, 0]);
  });

  it("that are none, name no driver, or are too long are refused", async () => {
    const refused = async (path: string, body: string) => {
      const answer = await upload(owner, path, body);
      return [answer.status, (await bodyOf(answer)).code];
    };
    expect(await refused("name=A", "{}")).toEqual([422, "not-a-recording"]);
    expect(await refused("name=A", text.replace("lanternfield-lf8", "Not A Slug"))).toEqual([422, "not-a-recording"]);
    expect(await refused("name=A", text.replace("lanternfield-lf8", "\\u0000"))).toEqual([422, "not-a-recording"]);
    expect(await refused("name=A&strikeOut=true", text.replace("lanternfield-lf8", "nobody-knows"))).toEqual([
      422,
      "no-driver",
    ]);
    expect(await refused(`name=A&deviceId=${crypto.randomUUID()}`, text)).toEqual([422, "no-device"]);
    expect((await upload(owner, "name=A", " ".repeat(4 * 1024 * 1024 + 1))).status).toBe(413);
  });

  it("are what a report is computed on too: one that the driver cannot say makes it red", async () => {
    const brackenrow = await simulateRecording(compiled(small), { ...state, at: "2026-05-06T10:00:00Z", slots: [1] });
    const mine = brackenrow
      .replace('"slug":"brackenrow-4r"', '"slug":"testing-three"')
      .replace(/"hex":"11 0(.) /u, '"hex":"12 0$1 ');
    const body = { definition: { ...definition("0.0.1"), slug: "testing-three" } };
    expect((await call(postVersion, post(maintainer, { params: { slug: "testing-three" }, body }))).status).toBe(201);
    const recording = await bodyOf<RecordingView>(await upload(owner, "name=Hardware", mine));
    await call(
      postQuestion,
      post(owner, { params: { slug: "testing-three" }, body: { text: "?", recordingId: recording.id } }),
    );
    const report = await bodyOf<ConformanceDetail>(
      await call(postConformance, post(maintainer, { body: { slug: "testing-three", version: "0.0.1" } })),
    );
    expect(report.report.recordings).toEqual(["Hardware"]);
    expect(report.report.sections.filter(({ failed }) => failed > 0).map(({ name }) => name)).toEqual(["recordings"]);
    expect(report.green).toBe(false);
  });
});
