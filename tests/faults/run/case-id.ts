import { BYTE_FAULTS, type ByteFaultName, type ByteTrouble } from "./byte-faults";
import { DEVICE_NAMES, type DeviceName } from "./drivers";
import { FAULT_KINDS, type Fault, type FaultKind } from "./fault-line";
import type { Intent } from "./owner";

export const SCENARIOS = ["backup", "run", "put-back"] as const;
export type Scenario = (typeof SCENARIOS)[number];
/** Those of live alignment: swept at requests alone. */
const ALIGN_SCENARIOS = ["align", "by-hand"] as const;

/** One case of a sweep: a device, what is done with it, and what goes wrong. */
export type Case = {
  readonly device: DeviceName;
  /**
   * `put-back`: troubles begin when the run is being tried, and the owner puts back. `align`: they begin there too, and the owner
   * goes on by live alignment. `by-hand`: a run without a plan, opened for live alignment.
   */
  readonly scenario: Scenario | (typeof ALIGN_SCENARIOS)[number];
  readonly intent: Intent;
  readonly powerOnSlot: 1 | 2;
  readonly dirty: boolean;
  readonly hidden: boolean;
  /** See `WorldOptions`. */
  readonly way: 1 | 3 | 5;
  readonly faults: readonly Fault[];
  readonly bytes: readonly ByteTrouble[];
};

export const CALM = { powerOnSlot: 2, dirty: false, hidden: false, way: 1, faults: [], bytes: [] } as const satisfies Partial<Case>;

const WAYS = { out: "host-to-device", in: "device-to-host" } as const;

/**
 * The name that repeats a case: `lf8/run/keep,finish/slot2/reply-lost@12+out.flip3@140!`. `dirty`, `hidden`, `way3` and `way5`
 * stand after the slot; a byte's trouble has its direction before it, and `!` behind it where it lasts.
 */
export function caseId({ device, scenario, intent, powerOnSlot, dirty, hidden, way, faults, bytes }: Case): string {
  const setting = [`slot${powerOnSlot}`, ...(dirty ? ["dirty"] : []), ...(hidden ? ["hidden"] : []), ...(way === 1 ? [] : [`way${way}`])].join(",");
  const troubles = [
    ...faults.map(({ kind, at }) => `${kind}@${at}`),
    ...bytes.map(({ fault, direction, at, lasting }) => `${direction === WAYS.out ? "out" : "in"}.${fault}@${at}${lasting ? "!" : ""}`),
  ];
  return [device, scenario, `${intent.wish},${intent.recovery}`, setting, troubles.join("+")].join("/");
}

const isOneOf = <T extends string>(names: readonly T[], name: string | undefined): name is T => names.some((one) => one === name);
const isByteFault = (name: string | undefined): name is ByteFaultName => name !== undefined && name in BYTE_FAULTS;

function parseTrouble(text: string): Fault | ByteTrouble | null {
  const [, way, name, at, lasting] = /^(?:(in|out)\.)?([a-z0-9-]+)@(\d+)(!)?$/u.exec(text) ?? [];
  if (at === undefined) return null;
  if (way === "in" || way === "out") return isByteFault(name) ? { fault: name, direction: WAYS[way], at: Number(at), lasting: lasting !== undefined } : null;
  return isOneOf<FaultKind>(FAULT_KINDS, name) ? { kind: name, at: Number(at) } : null;
}

/** The case of a name. Throws with what it cannot read. */
export function parseCase(id: string): Case {
  const [device, scenario, intent = "", setting = "", troubleText = ""] = id.split("/");
  const [wish, recovery] = intent.split(",");
  const parts = setting.split(",");
  const troubles = troubleText === "" ? [] : troubleText.split("+").map((text) => parseTrouble(text));
  if (!isOneOf(DEVICE_NAMES, device) || !isOneOf([...SCENARIOS, ...ALIGN_SCENARIOS], scenario) || !isOneOf(["keep", "put-back"] as const, wish) || !isOneOf(["finish", "put-back"] as const, recovery)) {
    throw new Error(`${id} is no name of a case`);
  }
  const faults: Fault[] = [];
  const bytes: ByteTrouble[] = [];
  for (const trouble of troubles) {
    if (trouble === null) throw new Error(`${id} names a trouble that there is not`);
    if ("kind" in trouble) faults.push(trouble);
    else bytes.push(trouble);
  }
  const way = parts.includes("way3") ? 3 : parts.includes("way5") ? 5 : 1;
  return { device, scenario, way, intent: { wish, recovery }, powerOnSlot: parts.includes("slot1") ? 1 : 2, dirty: parts.includes("dirty"), hidden: parts.includes("hidden"), faults, bytes };
}
