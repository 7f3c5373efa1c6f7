import { CALM } from "@/tests/faults/run/case-id";
import { DEVICE_NAMES } from "@/tests/faults/run/drivers";
import { FAULT_KINDS } from "@/tests/faults/run/fault-line";
import { Tally } from "@/tests/faults/run/sweep";
import type { Measurement } from "./measure";

/** Requests at which each fault strikes, on each device. */
const AT = [5, 12, 19];
/** What the cover of the tests needs to be done in its time on one core: some 15 000 cases in 100 s on two. */
const LEAST_A_MINUTE = 1500;

/** How many cases of the fault sweep over whole runs one core lives through in a minute. */
export async function measureSweepPace(): Promise<readonly Measurement[]> {
  const tally = new Tally();
  const live = async (at: number) => {
    for (const device of DEVICE_NAMES) {
      for (const kind of FAULT_KINDS) await tally.live({ ...CALM, device, scenario: "run", intent: { wish: "keep", recovery: "put-back" }, faults: [{ at, kind }] });
    }
  };
  await live(2);
  tally.cases = 0;
  const startMs = performance.now();
  for (const at of AT) await live(at);
  const minutes = (performance.now() - startMs) / 60_000;
  if (tally.broken.length > 0) throw new Error(tally.broken.join("\n"));
  return [{ name: "Fault sweep over whole runs, one core", value: tally.cases / minutes, unit: "a min", limit: LEAST_A_MINUTE, atLeast: true }];
}
