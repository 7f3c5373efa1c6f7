import { sql } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { POST as postConformance } from "@/app/api/conformance/route";
import { GET as getReport } from "@/app/api/conformance/[id]/route";
import { GET as getMove, PUT as putDriver } from "@/app/api/devices/[id]/driver/route";
import { PUT as putNotice } from "@/app/api/devices/[id]/driver-notice/route";
import { POST as postDevice } from "@/app/api/devices/route";
import { GET as listNotices } from "@/app/api/driver-notices/route";
import { POST as importDriver } from "@/app/api/drivers/import/route";
import { GET as listDrivers } from "@/app/api/drivers/route";
import { GET as compare } from "@/app/api/drivers/[slug]/versions/[version]/comparison/route";
import { GET as exportDriver } from "@/app/api/drivers/[slug]/versions/[version]/export/route";
import { POST as publish } from "@/app/api/drivers/[slug]/versions/[version]/publication/route";
import {
  DELETE as discard,
  GET as getVersion,
  PUT as putVersion,
} from "@/app/api/drivers/[slug]/versions/[version]/route";
import { POST as withdraw } from "@/app/api/drivers/[slug]/versions/[version]/withdrawal/route";
import { GET as listVersions, POST as postVersion } from "@/app/api/drivers/[slug]/versions/route";
import { db } from "@/db/client";
import type { ConformanceDetail } from "@/lib/contracts/conformance";
import type { DeviceView } from "@/lib/contracts/device";
import type {
  DriverMovePreview,
  DriverNotice,
  DriverSummary,
  DriverVersionDetail,
  DriverVersionView,
} from "@/lib/contracts/driver";
import type { Page } from "@/lib/contracts/page";
import { hashValue } from "@/lib/profile/canonical";
import { bodyOf, call } from "@/tests/integration/routes/http";
import { person } from "@/tests/integration/routes/people";
import type { Person } from "@/tests/integration/routes/people";
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
const at = (version: string) => ({ slug: "testing-one", version });

let maintainer: Person;
let owner: Person;
let other: Person;

beforeAll(async () => {
  [maintainer, owner, other] = [await person("maintainer"), await person(), await person()];
});

const as = (who: Person, more: object = {}) => ({ cookie: who.cookie, ...more });
const post = (who: Person, more: object = {}) => ({ method: "POST", cookie: who.cookie, ...more });
const ifMatch = (revision: number) => ({ headers: { "if-match": `"${revision}"` } });

async function drafted(version: string, more: object = {}): Promise<DriverVersionDetail> {
  const answer = await call(
    postVersion,
    post(maintainer, {
      params: { slug: "testing-one" },
      body: { definition: definition(version, more), note: `Version ${version}` },
    }),
  );
  expect(answer.status).toBe(201);
  return bodyOf(answer);
}

const proved = (version: string) => call(postConformance, post(maintainer, { body: at(version) }));

async function published(version: string, more: object = {}): Promise<DriverVersionView> {
  await drafted(version, more);
  const report = await proved(version);
  expect(report.status).toBe(201);
  const standing = await bodyOf<DriverVersionDetail>(await call(getVersion, as(maintainer, { params: at(version) })));
  const answer = await call(publish, post(maintainer, { params: at(version), ...ifMatch(standing.revision) }));
  expect([answer.status, standing.state]).toEqual([200, "conformance"]);
  return bodyOf(answer);
}

describe("a driver version", { timeout: 300_000 }, () => {
  it("begins as a draft that maintainers alone see, unfinished or not, with what is wrong by path", async () => {
    const draft = await drafted("0.1.0", { transport: { ...small.transport, baudRate: 0 } });
    expect(draft).toMatchObject({
      state: "draft",
      origin: "written",
      revision: 1,
      report: null,
      author: { id: maintainer.id },
    });
    expect(draft.problems).toEqual([{ path: "transport.baudRate", message: expect.any(String) }]);
    expect(draft.hash).toBe(hashValue(draft.definition));
    for (const cookie of [undefined, owner.cookie]) {
      expect((await call(getVersion, { cookie, params: at("0.1.0") })).status).toBe(404);
      expect((await call(exportDriver, { cookie, params: at("0.1.0") })).status).toBe(404);
      expect((await call(listVersions, { cookie, params: { slug: "testing-one" } })).status).toBe(404);
      const all = await bodyOf<Page<DriverSummary>>(await call(listDrivers, { cookie }));
      expect(all.items.map(({ slug }) => slug)).toEqual(["brackenrow-4r", "lanternfield-lf8", "ternwick-16"]);
    }
    const seen = await bodyOf<Page<DriverSummary>>(await call(listDrivers, as(maintainer)));
    expect(seen.items.find(({ slug }) => slug === "testing-one")).toMatchObject({ latest: null, unpublished: 1 });
    expect(
      (
        await call(
          postVersion,
          post(maintainer, { params: { slug: "testing-one" }, body: { definition: definition("0.1.0") } }),
        )
      ).status,
    ).toBe(409);
    expect(
      (
        await call(
          postVersion,
          post(maintainer, { params: { slug: "other-one" }, body: { definition: definition("0.1.1") } }),
        )
      ).status,
    ).toBe(422);
  });

  it("changes after the revision that was seen, and of two changes at once only by the first", async () => {
    const change = (revision: number | null, note: string) =>
      call(putVersion, {
        method: "PUT",
        ...as(maintainer, {
          params: at("0.1.0"),
          body: { definition: definition("0.1.0"), note },
          ...(revision === null ? {} : ifMatch(revision)),
        }),
      });
    expect((await change(null, "blind")).status).toBe(428);
    const answers = await Promise.all([change(1, "one"), change(1, "two")]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412]);
    const now = await bodyOf<DriverVersionDetail>(await call(getVersion, as(maintainer, { params: at("0.1.0") })));
    expect(now).toMatchObject({ revision: 2, problems: [] });
    const renamed = await call(putVersion, {
      method: "PUT",
      ...as(maintainer, { params: at("0.1.0"), body: { definition: definition("0.2.0") }, ...ifMatch(2) }),
    });
    expect([renamed.status, (await bodyOf(renamed)).code]).toEqual([422, "not-a-definition"]);
  });

  it("is not published before the server itself found it green, and a change after that takes it back", async () => {
    expect((await call(publish, post(maintainer, { params: at("0.1.0"), ...ifMatch(2) }))).status).toBe(409);
    const report = await bodyOf<ConformanceDetail>(await proved("0.1.0"));
    expect(report).toMatchObject({ green: true, outdated: false, report: { green: true } });
    expect((await call(getReport, { params: { id: report.id } })).status).toBe(404);
    expect((await call(getReport, as(maintainer, { params: { id: report.id } }))).status).toBe(200);
    const candidate = await bodyOf<DriverVersionDetail>(
      await call(getVersion, as(maintainer, { params: at("0.1.0") })),
    );
    expect(candidate).toMatchObject({ state: "conformance", report: { id: report.id, green: true } });
    const changed = await call(putVersion, {
      method: "PUT",
      ...as(maintainer, {
        params: at("0.1.0"),
        body: { definition: definition("0.1.0", { timingTakesEffect: "recall" }) },
        ...ifMatch(candidate.revision),
      }),
    });
    expect(await bodyOf<DriverVersionDetail>(changed)).toMatchObject({
      state: "draft",
      report: null,
      revision: candidate.revision + 1,
    });
    expect(await bodyOf<ConformanceDetail>(await proved("0.1.0"))).toMatchObject({ green: false });
    const red = await bodyOf<DriverVersionDetail>(await call(getVersion, as(maintainer, { params: at("0.1.0") })));
    expect(red).toMatchObject({ state: "draft", report: { green: false } });
    expect((await call(publish, post(maintainer, { params: at("0.1.0"), ...ifMatch(red.revision) }))).status).toBe(409);
    await expect(
      db.execute(
        sql`update driver_version set state = 'published', came_from = 'conformance', published_at = now() where slug = 'testing-one'`,
      ),
    ).rejects.toThrow();
    expect(
      (await call(discard, { method: "DELETE", ...as(maintainer, { params: at("0.1.0"), ...ifMatch(red.revision) }) }))
        .status,
    ).toBe(204);
  });

  it("is there for everybody once it is published, and then says the same for ever", async () => {
    const version = await published("1.0.0");
    expect(version).toMatchObject({ state: "published", publishedAt: expect.any(String) });
    expect((await call(getVersion, { params: at("1.0.0") })).status).toBe(200);
    const change = {
      params: at("1.0.0"),
      body: { definition: definition("1.0.0", { maker: "Other" }) },
      ...ifMatch(version.revision),
    };
    expect((await call(putVersion, { method: "PUT", ...as(maintainer, change) })).status).toBe(409);
    expect(
      (
        await call(discard, {
          method: "DELETE",
          ...as(maintainer, { params: at("1.0.0"), ...ifMatch(version.revision) }),
        })
      ).status,
    ).toBe(409);
    await expect(
      db.execute(sql`update driver_version set definition = '{}' where version = '1.0.0' and slug = 'testing-one'`),
    ).rejects.toThrow();
    await expect(
      db.execute(sql`delete from driver_version where version = '1.0.0' and slug = 'testing-one'`),
    ).rejects.toThrow();
    await expect(db.execute(sql`update conformance_report set green = false`)).rejects.toThrow();
  });

  it("goes out as a file and comes in as a draft, byte for byte the same definition", async () => {
    const file = await call(exportDriver, { params: at("1.0.0") });
    expect(file.headers.get("content-disposition")).toBe('attachment; filename="testing-one-1.0.0.driver.json"');
    const text = (await file.text()).replaceAll("testing-one", "testing-two");
    const made = await call(importDriver, post(maintainer, { text }));
    expect(made.status).toBe(201);
    const draft = await bodyOf<DriverVersionDetail>(made);
    expect(draft).toMatchObject({ slug: "testing-two", state: "draft", problems: [] });
    expect(draft.definition).toEqual(JSON.parse(text));
    expect((await call(importDriver, post(maintainer, { text }))).status).toBe(409);
    const broken = await call(importDriver, post(maintainer, { text: '{\n"slug": }' }));
    expect(await bodyOf(broken)).toMatchObject({
      status: 422,
      code: "not-a-definition",
      errors: [{ path: "", message: expect.stringContaining("line 2") }],
    });
    const deep = await call(
      importDriver,
      post(maintainer, { text: `${'{"a":'.repeat(50_000)}1${"}".repeat(50_000)}` }),
    );
    expect(deep.status).toBe(422);
    for (const maker of ["\\ud800", "\\u0000"]) {
      expect((await call(importDriver, post(maintainer, { text: text.replace("Testing", maker) }))).status).toBe(422);
    }
  });

  it("is told of to owners of older ones, who see what it reads differently and move, or put the notice aside", async () => {
    const body = {
      name: "Mine",
      driver: at("1.0.0"),
      maker: "Testing",
      model: "One",
      serialNumber: "T1",
      firmware: "2.0",
      simulated: true,
    };
    const device = await bodyOf<DeviceView>(await call(postDevice, post(owner, { body })));
    const second = await bodyOf<DeviceView>(
      await call(postDevice, post(owner, { body: { ...body, name: "Second", serialNumber: "T2" } })),
    );
    const notices = async () =>
      (await bodyOf<{ items: DriverNotice[] }>(await call(listNotices, as(owner)))).items.map(
        ({ kind, device: { name }, from, to }) => [kind, name, from, to],
      );
    expect(await notices()).toEqual([]);
    await published("1.10.0", { pace: { ...small.pace, retries: 4 } });
    expect(await notices()).toEqual([
      ["new-version", "Mine", "1.0.0", "1.10.0"],
      ["new-version", "Second", "1.0.0", "1.10.0"],
    ]);
    expect((await bodyOf<{ items: [] }>(await call(listNotices, as(other)))).items).toEqual([]);

    const preview = await bodyOf<DriverMovePreview>(
      await call(getMove, as(owner, { params: { id: device.id }, path: "/x?to=1.10.0" })),
    );
    expect(preview).toMatchObject({ from: "1.0.0", to: "1.10.0", backupId: null, more: false, settings: [] });
    expect(preview.changes).toEqual(
      expect.arrayContaining([
        { path: "pace.retries", left: 3, right: 4 },
        { path: "version", left: "1.0.0", right: "1.10.0" },
      ]),
    );
    const both = await bodyOf<{ changes: unknown[] }>(
      await call(compare, { params: at("1.0.0"), path: "/x?with=1.10.0" }),
    );
    expect(both.changes).toHaveLength(2);
    const put = (route: typeof putDriver, id: string, version: string, who = owner) =>
      call(route, { method: "PUT", ...as(who, { params: { id }, body: { version } }) });
    expect((await put(putDriver, device.id, "3.0.0")).status).toBe(422);
    expect((await put(putDriver, device.id, "1.10.0", other)).status).toBe(404);
    expect(await bodyOf<DeviceView>(await put(putDriver, device.id, "1.10.0"))).toMatchObject({
      driver: { version: "1.10.0" },
      version: 2,
    });
    expect(await bodyOf<DeviceView>(await put(putNotice, second.id, "1.10.0"))).toMatchObject({
      driver: { version: "1.0.0" },
    });
    expect(await notices()).toEqual([]);

    const standing = await bodyOf<DriverVersionDetail>(await call(getVersion, { params: at("1.0.0") }));
    const gone = await call(
      withdraw,
      post(maintainer, {
        params: at("1.0.0"),
        body: { reason: "It misreads the count of starts." },
        ...ifMatch(standing.revision),
      }),
    );
    expect(await bodyOf(gone)).toMatchObject({
      state: "withdrawn",
      withdrawnReason: "It misreads the count of starts.",
    });
    expect(await notices()).toEqual([["withdrawn", "Second", "1.0.0", "1.10.0"]]);
    const list = await bodyOf<Page<DriverVersionView>>(
      await call(listVersions, { params: { slug: "testing-one" }, path: "/x?limit=1" }),
    );
    expect(list.items.map(({ version }) => version)).toEqual(["1.10.0"]);
    const rest = await bodyOf<Page<DriverVersionView>>(
      await call(listVersions, { params: { slug: "testing-one" }, path: `/x?limit=5&cursor=${list.nextCursor}` }),
    );
    expect([rest.items.map(({ version, state }) => [version, state]), rest.nextCursor]).toEqual([
      [["1.0.0", "withdrawn"]],
      null,
    ]);
    expect((await call(listVersions, { params: { slug: "testing-one" }, path: "/x?cursor=AAAA" })).status).toBe(400);
  });
});
