import type { NativeValues } from "@/lib/serial/native";
import { toNative } from "@/lib/serial/driver/neutral";
import type { AlignTarget } from "@/lib/serial/run/align-step";
import type { World } from "./world";

const porches = (px: number): AlignTarget => [
  { path: "modes[1].timing.horizontal.frontPorch", value: 38 - px },
  { path: "modes[1].timing.horizontal.backPorch", value: 114 + px },
];

/**
 * What an owner aligns, act by act, from the factory's porches of 38 and 114 clocks: a porch step that has to be split, a step
 * of one slot, then two targets at once, of which the second waits for the first.
 */
export const ALIGN_ACTS: readonly (readonly AlignTarget[])[] = [
  [porches(-30)],
  [[{ path: "slots[1].placement.offsetPx", value: 2 }]],
  [[{ path: "slots[2].placement.widthPct", value: 84 }], porches(10)],
];

/** Settings that alignment moves here. */
const ALIGNED_KEYS = [...new Set(ALIGN_ACTS.flat(2).map(({ path }) => path))];

export function pickAligned(values: NativeValues): NativeValues {
  return Object.fromEntries(ALIGNED_KEYS.flatMap((key) => (values[key] === undefined ? [] : [[key, values[key]]])));
}

function wantedBy({ driver }: World, target: AlignTarget): NativeValues {
  return Object.fromEntries(
    target.flatMap(({ path, value }) => {
      const setting = driver.byKey.get(path);
      const native = setting && value !== null ? toNative(setting.value, value) : undefined;
      return native === undefined ? [] : [[path, native]];
    }),
  );
}

/** Asks for one step, and remembers that it was asked for. Every owner here has accepted that a device may store each step. */
export function align(world: World, target: AlignTarget): Promise<unknown> {
  if (world.asked.length === 0) world.asked.push(pickAligned(world.run.values));
  const wanted = wantedBy(world, target);
  // A step may have been taken back: whatever was asked for before can be what this one is laid over.
  world.asked.push(...[...world.asked].map((before) => ({ ...before, ...wanted })));
  return world.run.align(target, { storesAtOnceAccepted: true });
}

/** What the run counts as new was planned, or asked for. */
export function wasAskedFor({ asked, run }: World): boolean {
  const counts = JSON.stringify(pickAligned(run.values));
  return asked.length === 0 || asked.some((one) => JSON.stringify(pickAligned(one)) === counts);
}

/** Nothing differs from the backup. */
export function nothingNew({ run, backup }: World): boolean {
  return Object.entries(run.values).every(([key, value]) => backup.content.values[key] === value);
}
