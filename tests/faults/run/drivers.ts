import { brackenrow4r } from "@/lib/serial/drivers/brackenrow-4r";
import { lanternfieldLf8 } from "@/lib/serial/drivers/lanternfield-lf8";
import { ternwick16 } from "@/lib/serial/drivers/ternwick-16";
import type { DriverDefinition } from "@/lib/serial/driver/definition";
import { cutDown } from "@/tests/unit/serial/run/run-rig";

/** Settings that a run cannot tell from others: left out, so that a whole read is short. */
const ALIKE = /^(?:everywhere\.trim\.(?!leftPx)|native\.|modes\[\*\]\.name|slots\[\*\]\.(?:name|colour\.|syncKind|outputKind|inputRange|lineFilter|placement\.(?:heightPct|offsetLines)))/u;

/** The same device with two slots, two modes and one setting of each kind: protocol, memory, timer, pace and effect as shipped. */
function small(definition: DriverDefinition): DriverDefinition {
  const { factory, ...cut } = cutDown(definition, 2, 2);
  const isAlike = (key: string) => ALIKE.test(key.replace(/\[\d+\]/u, "[*]"));
  return {
    ...cut,
    settings: definition.settings.filter(({ key }) => !isAlike(key)),
    factory: Object.fromEntries(Object.entries(factory).filter(([key]) => !isAlike(key))),
  };
}

/** The three shipped devices, small. */
export const FAULT_DEVICES = { lf8: small(lanternfieldLf8), brackenrow: small(brackenrow4r), ternwick: small(ternwick16) } as const;
export type DeviceName = keyof typeof FAULT_DEVICES;
export const DEVICE_NAMES = ["lf8", "brackenrow", "ternwick"] as const satisfies readonly DeviceName[];
