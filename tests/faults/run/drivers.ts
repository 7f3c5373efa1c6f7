import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { cutDown } from "@/tests/unit/serial/run/run-rig";

/** Settings that a run cannot tell from others: left out, so that a whole read is short. */
const ALIKE = /^(?:everywhere\.trim\.(?!leftPx)|native\.|modes\[\*\]\.name|slots\[\*\]\.(?:name|input|colour\.|syncKind|outputKind|inputRange|lineFilter|placement\.(?:heightPct|offsetLines)))/u;

/** The LF-8 with two slots, two modes and one setting of each kind: protocol, memory, timer, pace and recall as shipped. */
export const faultLf8: DriverDefinition = {
  ...cutDown(lanternfieldLf8, 2, 2),
  settings: lanternfieldLf8.settings.filter(({ key }) => !ALIKE.test(key)),
  factory: Object.fromEntries(Object.entries(cutDown(lanternfieldLf8, 2, 2).factory).filter(([key]) => !ALIKE.test(key.replace(/\[\d+\]/u, "[*]")))),
};

/** Memory as of a device that cannot say what it stored, and has no timer: each number takes effect at once. */
export const cannotSay: DriverDefinition = {
  ...faultLf8,
  slug: "cannot-say",
  memory: { volatileWrites: true, commitTakesMs: 0 },
  status: { ...faultLf8.status, committed: undefined, rasterOut: undefined },
  timingTakesEffect: "write",
};

/** Memory as of a device whose writes are non-volatile at once, and that counts no starts. */
export const storesAtOnce: DriverDefinition = {
  ...cannotSay,
  slug: "stores-at-once",
  memory: { volatileWrites: false, commitTakesMs: 0 },
  status: { ...cannotSay.status, bootCount: undefined },
};
