import { POST as postBackup } from "@/app/api/devices/[id]/backups/route";
import { POST as postDevice } from "@/app/api/devices/route";
import { POST as postScreen } from "@/app/api/screens/route";
import { demoScreens } from "@/db/demo/screens";
import { simulateBackup } from "@/db/demo/simulate-backup";
import type { BackupDetail } from "@/lib/contracts/backup";
import type { DeviceView } from "@/lib/contracts/device";
import type { ScreenView } from "@/lib/contracts/screen";
import type { TakenBackup } from "@/lib/serial/backup/types";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import type { NativeValues } from "@/lib/serial/native";
import { compiledDriver } from "@/lib/serial/plan/compiled-driver";
import { bodyOf, call } from "@/tests/integration/routes/http";
import type { Person } from "@/tests/integration/routes/people";

export const driver = { slug: lanternfieldLf8.slug, version: lanternfieldLf8.version };
export const cabinet = demoScreens[0]?.envelope;

let serial = 0;

export function deviceBody(more: object = {}): Record<string, unknown> {
  serial += 1;
  return {
    name: `Device ${serial}`,
    driver,
    maker: "Lanternfield",
    model: "LF-8",
    serialNumber: `T-${serial}`,
    firmware: "3.2",
    simulated: true,
    ...more,
  };
}

/** A whole read of a simulated LF-8 by the backup code, in virtual time. */
export function taken(values: NativeValues = {}): Promise<TakenBackup> {
  const source = { activePx: 1280, activeLines: 720, interlaced: false, fieldRateHz: 60 };
  return simulateBackup(compiledDriver(lanternfieldLf8), {
    values,
    serialNumber: "T-0",
    firmware: "3.2",
    activeSlot: 1,
    source,
  });
}

type Read = Pick<TakenBackup, "activeSlot" | "arriving" | "rasterOut"> & {
  readonly content: Omit<TakenBackup["content"], "document">;
};

export function backupBody(
  { content, activeSlot, arriving, rasterOut }: Read,
  more: object = {},
): Record<string, unknown> {
  const { driver: from, values, unreadable } = content;
  return {
    cause: "by-hand",
    takenAt: "2026-10-01T10:00:00.000Z",
    firmware: "3.2",
    activeSlot,
    arriving,
    rasterOut,
    content: { driver: from, values, unreadable },
    ...more,
  };
}

async function made<T>(answer: Response): Promise<T> {
  if (answer.status !== 201) throw new Error(`${answer.status}: ${await answer.text()}`);
  return bodyOf<T>(answer);
}

export async function addScreen({ cookie }: Person, envelope: object | undefined = cabinet): Promise<ScreenView> {
  return made(await call(postScreen, { method: "POST", cookie, body: { envelope } }));
}

export async function addDevice({ cookie }: Person, more: object = {}): Promise<DeviceView> {
  return made(await call(postDevice, { method: "POST", cookie, body: deviceBody(more) }));
}

export async function addBackup(
  { cookie }: Person,
  deviceId: string,
  read: Read,
  more: object = {},
): Promise<BackupDetail> {
  return made(
    await call(postBackup, { method: "POST", cookie, params: { id: deviceId }, body: backupBody(read, more) }),
  );
}
