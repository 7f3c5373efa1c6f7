import { demoProfiles } from "@/db/demo/seed-profiles";
import type { BackupDetail } from "@/lib/contracts/backup";
import type { DeviceView } from "@/lib/contracts/device";
import type { PlanView } from "@/lib/contracts/plan";
import type { ProfileDetail } from "@/lib/contracts/profile";
import type { QuestionView, RecordingView } from "@/lib/contracts/recording";
import type { RunView } from "@/lib/contracts/run";
import type { ScreenView } from "@/lib/contracts/screen";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { standardRaster } from "@/lib/timing/standards";
import { publishedEdids } from "@/tests/fixtures/standards/read";
import { backupBody, cabinet, deviceBody } from "@/tests/integration/routes/bench";
import type { Call } from "@/tests/integration/routes/http";
import type { Person } from "@/tests/integration/routes/people";

/** Everything that one owner has, private, with a run that is open. */
export type Belongings = {
  readonly owner: Person;
  readonly screen: ScreenView;
  readonly device: DeviceView;
  readonly backup: BackupDetail;
  readonly spare: BackupDetail;
  readonly profile: ProfileDetail;
  readonly plan: PlanView;
  readonly run: RunView;
  readonly recording: RecordingView;
  readonly question: QuestionView;
  readonly session: string;
};

/**
 * What a valid request to a route is, and what it comes to for the owner of what it names and for anybody else
 * who is signed in, whatever their role.
 */
export type Walk = {
  readonly given: (of: Belongings) => Call;
  readonly owner: number;
  readonly others: number;
  /** What it comes to for maintainers and admins, where that is something else. */
  readonly maintainers?: number;
  readonly nobody?: number;
};

/** A profile that the owner keeps private. */
export const document = demoProfiles.find(({ key }) => key === "upright-240")?.revisions.at(-1)?.document;
const publishedEdid = () => Uint8Array.from(publishedEdids()[0]?.[1] ?? []);
/** A version that is published, so that no maintainer's act on it does anything. */
const shipped = { slug: lanternfieldLf8.slug, version: lanternfieldLf8.version };
/** Two lines of a recording, as a page saves them. */
export const recordingFile = `${JSON.stringify({ format: "backporch-recording", version: 1, driver: shipped, startedAt: "2026-01-01T00:00:00.000Z", struckOut: false })}
{"atMs":0,"direction":"out","hex":"2A 49 44 4E 3F 0A"}
`;
const id = (of: { readonly id: string }, more: Call = {}): Call => ({ params: { id: of.id }, ...more });

/** In an order in which each finds what it needs: what deletes comes last. */
export const walks: Readonly<Record<string, Walk>> = {
  "GET /api/health": { given: () => ({}), owner: 200, others: 200, nobody: 200 },
  "POST /api/timing/describe": {
    given: () => ({ body: { timing: standardRaster("240p60").timing } }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/timing/fit": {
    given: () => ({
      body: { activeLines: 240, activePx: 1440, fieldRateHz: 60, interlaced: false, screen: cabinet },
    }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/timing/modeline": {
    given: () => ({ body: { timing: standardRaster("240p60").timing } }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "GET /api/timing/standards": { given: () => ({}), owner: 200, others: 200, nobody: 200 },
  "POST /api/screens/edid": { given: () => ({ bytes: publishedEdid() }), owner: 200, others: 200, nobody: 200 },
  "POST /api/signal/attenuator": {
    given: () => ({ body: { sourceVpp: 4, sourceOhm: 75, loadOhm: 75, targetVpp: 0.3 } }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/profiles/check": { given: () => ({ body: { document } }), owner: 200, others: 200, nobody: 200 },
  "POST /api/profiles/compare": {
    given: () => ({ body: { left: document, right: document } }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/profiles/convert": {
    given: () => ({ body: document, path: "/x?to=json" }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/account": {
    given: () => ({ body: { name: "N", email: "walk@example.org", password: "long enough words" } }),
    owner: 202,
    others: 202,
    nobody: 202,
  },
  "POST /api/sessions": {
    given: () => ({ body: { email: "nobody@example.org", password: "long enough words" } }),
    owner: 401,
    others: 401,
    nobody: 401,
  },
  "GET /api/account": { given: () => ({}), owner: 200, others: 200 },
  "PATCH /api/account": { given: () => ({ body: { name: "Renamed" } }), owner: 200, others: 200 },
  "PUT /api/account/password": {
    given: () => ({ body: { current: "no password here", next: "long enough words" } }),
    owner: 422,
    others: 422,
  },
  "GET /api/sessions": { given: () => ({}), owner: 200, others: 200 },
  "GET /api/screens": { given: () => ({}), owner: 200, others: 200 },
  "POST /api/screens": { given: () => ({ body: { envelope: cabinet } }), owner: 201, others: 201 },
  "GET /api/screens/{id}": { given: ({ screen }) => id(screen), owner: 200, others: 404 },
  "PATCH /api/screens/{id}": {
    given: ({ screen }) => id(screen, { body: { notes: "Walked" }, headers: { "if-match": '"1"' } }),
    owner: 200,
    others: 404,
  },
  "GET /api/devices": { given: () => ({}), owner: 200, others: 200 },
  "POST /api/devices": {
    given: ({ screen }) => ({ body: deviceBody({ screenId: screen.id }) }),
    owner: 201,
    others: 422,
  },
  "GET /api/devices/{id}": { given: ({ device }) => id(device), owner: 200, others: 404 },
  "PATCH /api/devices/{id}": {
    given: ({ device }) => id(device, { body: { name: "Walked" } }),
    owner: 200,
    others: 404,
  },
  "GET /api/devices/{id}/backups": { given: ({ device }) => id(device), owner: 200, others: 404 },
  "POST /api/devices/{id}/backups": {
    given: ({ device, backup }) => id(device, { body: backupBody(backup) }),
    owner: 201,
    others: 404,
  },
  "GET /api/backups/{id}": { given: ({ backup }) => id(backup), owner: 200, others: 404 },
  "GET /api/backups/{id}/compare": {
    given: ({ backup, spare }) => id(backup, { path: `/x?with=${spare.id}` }),
    owner: 200,
    others: 404,
  },
  "PATCH /api/backups/{id}": {
    given: ({ backup }) => id(backup, { body: { name: "Walked" } }),
    owner: 200,
    others: 404,
  },
  "PUT /api/backups/{id}/known-good": { given: ({ spare }) => id(spare), owner: 200, others: 404 },
  "DELETE /api/backups/{id}/known-good": { given: ({ spare }) => id(spare), owner: 200, others: 404 },
  "DELETE /api/backups/{id}": { given: ({ spare }) => id(spare), owner: 204, others: 404 },
  "POST /api/backups/{id}/undelete": { given: ({ spare }) => id(spare), owner: 200, others: 404 },
  "GET /api/profiles": { given: () => ({}), owner: 200, others: 200, nobody: 200 },
  "POST /api/profiles": {
    given: ({ backup }) => ({ body: { fromBackup: backup.id, slots: [1], title: "Walked", visibility: "private" } }),
    owner: 201,
    others: 404,
  },
  "POST /api/profiles/import": { given: () => ({ body: document }), owner: 201, others: 201 },
  "GET /api/profiles/{id}": { given: ({ profile }) => id(profile), owner: 200, others: 404, nobody: 404 },
  "GET /api/profiles/{id}/export": { given: ({ profile }) => id(profile), owner: 200, others: 404, nobody: 404 },
  "GET /api/profiles/{id}/revisions": { given: ({ profile }) => id(profile), owner: 200, others: 404, nobody: 404 },
  "GET /api/profiles/{id}/revisions/{number}": {
    given: ({ profile }) => ({ params: { id: profile.id, number: "1" } }),
    owner: 200,
    others: 404,
    nobody: 404,
  },
  "POST /api/profiles/{id}/revisions": {
    given: ({ profile }) => id(profile, { body: { document }, headers: { "if-match": '"1"' } }),
    owner: 201,
    others: 404,
  },
  "PATCH /api/profiles/{id}": {
    given: ({ profile }) => id(profile, { body: { visibility: "private" } }),
    owner: 200,
    others: 404,
  },
  "DELETE /api/profiles/{id}": { given: ({ profile }) => id(profile), owner: 204, others: 404 },
  "POST /api/plans": {
    given: ({ backup, profile, screen }) => ({
      body: {
        backupId: backup.id,
        target: { kind: "revision", revisionId: profile.revision.id },
        leftOut: [],
        screen: { id: screen.id },
        acknowledged: [],
        hash: "0".repeat(64),
      },
    }),
    // By then the profile is deleted, so even its owner gets no plan of it.
    owner: 422,
    others: 404,
  },
  "GET /api/plans/{id}": { given: ({ plan }) => id(plan), owner: 200, others: 404 },
  "GET /api/runs": { given: () => ({}), owner: 200, others: 200 },
  "POST /api/runs": {
    given: ({ plan }) => ({
      body: { planId: plan.id, holder: "walking-tab" },
      headers: { "if-match": `"${plan.hash}"` },
    }),
    owner: 409,
    others: 404,
  },
  "GET /api/runs/{id}": { given: ({ run }) => id(run), owner: 200, others: 404 },
  "GET /api/runs/{id}/steps": { given: ({ run }) => id(run), owner: 200, others: 404 },
  "POST /api/runs/{id}/steps": {
    given: ({ run }) =>
      id(run, {
        body: { holder: "walking-tab", entries: [{ number: 0, atMs: 1, kind: "state", state: "called-off" }] },
      }),
    owner: 200,
    others: 404,
  },
  "PUT /api/runs/{id}/holder": {
    given: ({ run }) => id(run, { body: { holder: "another-tab", force: true } }),
    owner: 409,
    others: 404,
  },
  "POST /api/runs/{id}/closing": {
    given: ({ run, spare }) => id(run, { body: { afterBackupId: spare.id } }),
    owner: 200,
    others: 404,
  },
  "GET /api/drivers": { given: () => ({}), owner: 200, others: 200, nobody: 200 },
  "POST /api/drivers/import": { given: () => ({ body: lanternfieldLf8 }), owner: 403, others: 403, maintainers: 409 },
  "GET /api/drivers/{slug}/versions": { given: () => ({ params: shipped }), owner: 200, others: 200, nobody: 200 },
  "POST /api/drivers/{slug}/versions": {
    given: () => ({ params: shipped, body: { definition: lanternfieldLf8 } }),
    owner: 403,
    others: 403,
    maintainers: 409,
  },
  "GET /api/drivers/{slug}/versions/{version}": {
    given: () => ({ params: shipped }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "PUT /api/drivers/{slug}/versions/{version}": {
    given: () => ({ params: shipped, body: { definition: lanternfieldLf8 }, headers: { "if-match": '"1"' } }),
    owner: 403,
    others: 403,
    maintainers: 409,
  },
  "DELETE /api/drivers/{slug}/versions/{version}": {
    given: () => ({ params: shipped, headers: { "if-match": '"1"' } }),
    owner: 403,
    others: 403,
    maintainers: 409,
  },
  "POST /api/drivers/{slug}/versions/{version}/publication": {
    given: () => ({ params: shipped, headers: { "if-match": '"1"' } }),
    owner: 403,
    others: 403,
    maintainers: 409,
  },
  "POST /api/drivers/{slug}/versions/{version}/withdrawal": {
    given: () => ({ params: shipped, body: { reason: "Walked" }, headers: { "if-match": '"99"' } }),
    owner: 403,
    others: 403,
    maintainers: 412,
  },
  "GET /api/drivers/{slug}/versions/{version}/export": {
    given: () => ({ params: shipped }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "GET /api/drivers/{slug}/versions/{version}/comparison": {
    given: () => ({ params: shipped, path: `/x?with=${shipped.version}` }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "GET /api/conformance": {
    given: () => ({ path: `/x?slug=${shipped.slug}&version=${shipped.version}` }),
    owner: 200,
    others: 200,
    nobody: 200,
  },
  "POST /api/conformance": {
    given: () => ({ body: { slug: shipped.slug, version: "9.9.9" } }),
    owner: 403,
    others: 403,
    maintainers: 404,
  },
  "GET /api/conformance/{id}": { given: ({ run }) => id(run), owner: 404, others: 404, nobody: 404 },
  "GET /api/driver-notices": { given: () => ({}), owner: 200, others: 200 },
  "GET /api/drivers/{slug}/questions": { given: () => ({ params: shipped }), owner: 200, others: 200 },
  "POST /api/drivers/{slug}/questions": {
    given: ({ recording }) => ({ params: shipped, body: { text: "Walked", recordingId: recording.id } }),
    owner: 201,
    others: 422,
  },
  "PUT /api/driver-questions/{id}/answer": {
    given: ({ question }) => id(question, { body: { text: "Walked" } }),
    owner: 403,
    others: 403,
    maintainers: 200,
  },
  "GET /api/recordings": { given: () => ({}), owner: 200, others: 200 },
  "POST /api/recordings": {
    given: ({ device }) => ({
      path: `/x?name=Walked&deviceId=${device.id}`,
      text: recordingFile,
      headers: { "content-type": "application/x-ndjson" },
    }),
    owner: 201,
    others: 422,
  },
  "GET /api/recordings/{id}": { given: ({ recording }) => id(recording), owner: 200, others: 404 },
  "GET /api/recordings/{id}/file": { given: ({ recording }) => id(recording), owner: 200, others: 404 },
  "DELETE /api/recordings/{id}": { given: ({ recording }) => id(recording), owner: 204, others: 404 },
  "GET /api/devices/{id}/driver": {
    given: ({ device }) => id(device, { path: `/x?to=${shipped.version}` }),
    owner: 200,
    others: 404,
  },
  "PUT /api/devices/{id}/driver": {
    given: ({ device }) => id(device, { body: { version: shipped.version } }),
    owner: 200,
    others: 404,
  },
  "PUT /api/devices/{id}/driver-notice": {
    given: ({ device }) => id(device, { body: { version: shipped.version } }),
    owner: 200,
    others: 404,
  },
  "DELETE /api/screens/{id}": { given: ({ screen }) => id(screen), owner: 204, others: 404 },
  "DELETE /api/devices/{id}": { given: ({ device }) => id(device), owner: 204, others: 404 },
  "DELETE /api/sessions/{id}": { given: ({ session }) => ({ params: { id: session } }), owner: 204, others: 404 },
  "DELETE /api/sessions": { given: () => ({}), owner: 200, others: 200 },
  "DELETE /api/sessions/current": { given: () => ({}), owner: 204, others: 204 },
};
