import { backupDetail, backupPage, backupView, type BackupDetail, type BackupView, type NewBackup } from "@/lib/contracts/backup";
import { devicePage, deviceView, type DeviceChange, type DeviceView, type NewDevice } from "@/lib/contracts/device";
import { driverVersionDetail, driverVersionPage } from "@/lib/contracts/driver";
import { planDetail, planView, type NewPlan, type PlanView } from "@/lib/contracts/plan";
import { profileDetail, revisionDetail, type ProfileDetail, type RevisionDetail } from "@/lib/contracts/profile";
import { runPage, runView, stepList, type NewRun, type NewSteps, type RunView } from "@/lib/contracts/run";
import { screenPage, screenView, type ScreenView } from "@/lib/contracts/screen";
import { callApi } from "@/components/ui/api";
import type { z } from "zod";
import type { ScreenEnvelope } from "@/lib/timing/envelope";

/** The most steps of one run that are asked for in one go; the route allows as many. */
const STEPS_AT_ONCE = 1000;

/** Versions that are looked through for the newest published one; the route allows as many. */
const VERSIONS_AT_ONCE = 100;

/** What the bench asks of the server, each call one route. Every call throws `ApiProblem`. */
export type BenchServer = typeof benchServer;

/** The routes behind the bench. Only used where somebody is signed in. */
export const benchServer = {
  async findDevice(driverSlug: string, serialNumber: string): Promise<DeviceView | null> {
    const query = new URLSearchParams({ driverSlug, serialNumber });
    return (await callApi(`/api/devices?${query}`, { shape: devicePage })).items[0] ?? null;
  },
  device: (id: string): Promise<DeviceView> => callApi(`/api/devices/${id}`, { shape: deviceView }),
  createDevice: (device: NewDevice): Promise<DeviceView> => callApi("/api/devices", { method: "POST", body: device, shape: deviceView }),
  changeDevice: (device: DeviceView, change: DeviceChange): Promise<DeviceView> =>
    callApi(`/api/devices/${device.id}`, { method: "PATCH", body: change, ifMatch: `"${device.version}"`, shape: deviceView }),
  /** The highest published version of a driver; versions come highest first. Null: none of the latest is published. */
  async newestDriver(slug: string): Promise<string | null> {
    const { items } = await callApi(`/api/drivers/${encodeURIComponent(slug)}/versions?limit=${VERSIONS_AT_ONCE}`, { shape: driverVersionPage });
    return items.find(({ state }) => state === "published")?.version ?? null;
  },
  async driverDefinition({ slug, version }: { readonly slug: string; readonly version: string }): Promise<unknown> {
    return (await callApi(`/api/drivers/${encodeURIComponent(slug)}/versions/${encodeURIComponent(version)}`, { shape: driverVersionDetail })).definition;
  },
  async lastBackup(deviceId: string): Promise<BackupView | null> {
    return (await callApi(`/api/devices/${deviceId}/backups?limit=1`, { shape: backupPage })).items[0] ?? null;
  },
  storeBackup: (deviceId: string, backup: NewBackup): Promise<BackupView> =>
    callApi(`/api/devices/${deviceId}/backups`, { method: "POST", body: backup, shape: backupView }),
  backup: (id: string): Promise<BackupDetail> => callApi(`/api/backups/${id}`, { shape: backupDetail }),
  async screens(): Promise<readonly ScreenView[]> {
    return (await callApi("/api/screens?limit=100", { shape: screenPage })).items;
  },
  createScreen: (envelope: ScreenEnvelope, presetId: string | null): Promise<ScreenView> =>
    callApi("/api/screens", { method: "POST", body: { envelope, presetId: presetId ?? undefined }, shape: screenView }),
  profile: (id: string): Promise<ProfileDetail> => callApi(`/api/profiles/${id}`, { shape: profileDetail }),
  revision: (id: string, number: number): Promise<RevisionDetail> => callApi(`/api/profiles/${id}/revisions/${number}`, { shape: revisionDetail }),
  storePlan: (plan: NewPlan): Promise<PlanView> => callApi("/api/plans", { method: "POST", body: plan, shape: planView }),
  plan: (id: string): Promise<z.infer<typeof planDetail>> => callApi(`/api/plans/${id}`, { shape: planDetail }),
  createRun: (run: NewRun, hash: string): Promise<RunView> => callApi("/api/runs", { method: "POST", body: run, ifMatch: `"${hash}"`, shape: runView }),
  async openRun(deviceId: string): Promise<RunView | null> {
    const query = new URLSearchParams({ deviceId, open: "true" });
    return (await callApi(`/api/runs?${query}`, { shape: runPage })).items[0] ?? null;
  },
  appendSteps: (runId: string, steps: NewSteps): Promise<undefined> => callApi(`/api/runs/${runId}/steps`, { method: "POST", body: steps }),
  steps: (runId: string, after: number): Promise<z.infer<typeof stepList>> =>
    callApi(`/api/runs/${runId}/steps?after=${after}&limit=${STEPS_AT_ONCE}`, { shape: stepList }),
  takeHold: (runId: string, holder: string, force: boolean): Promise<RunView> =>
    callApi(`/api/runs/${runId}/holder`, { method: "PUT", body: { holder, force }, shape: runView }),
  closeRun: (runId: string, afterBackupId: string): Promise<undefined> =>
    callApi(`/api/runs/${runId}/closing`, { method: "POST", body: { afterBackupId } }),
} as const;
