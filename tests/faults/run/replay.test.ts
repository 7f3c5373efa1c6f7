import { expect, it } from "vitest";
import { caseId, parseCase } from "./case-id";
import { explored } from "./sweep";

/** Cases that reach far, kept by name; and the one that `SWEEP` names. */
const KEPT = [
  "lf8/run/keep,finish/slot2/request-restart@14",
  "lf8/run/keep,put-back/slot1,dirty/timer@20",
  "lf8/run/keep,put-back/slot2/reply-unplug@30+reply-restart@41",
  "lf8/run/keep,put-back/slot2/tab@30",
  "lf8/run/keep,finish/slot1/second-tab@8",
  "brackenrow/run/keep,finish/slot2,hidden/reply-late@12",
  "brackenrow/run/keep,put-back/slot2,way5/reply-unplug@30",
  // A write whose answer a restart took was sent again, to a device without its mute and without what stood before.
  "brackenrow/run/keep,finish/slot1,way5/request-restart@10",
  "brackenrow/run/keep,put-back/slot1,way3/reply-restart@20",
  // The timer fired between the two writes of a porch step, and the half that was left took effect.
  "lf8/by-hand/keep,put-back/slot2/timer@14",
  "brackenrow/backup/keep,finish/slot2/in.drop@40!",
  "ternwick/run/keep,put-back/slot2/torn@9",
  "ternwick/put-back/put-back,put-back/slot2/out.flip3@60",
];
const NAMED = process.env.SWEEP !== undefined && !process.env.SWEEP.startsWith("short/") ? [process.env.SWEEP] : [];

it.each([...KEPT, ...NAMED])("repeats the case %s", async (id) => {
  const one = parseCase(id);
  expect(caseId(one)).toBe(id);
  const { struck, broken } = await explored(one);
  expect(broken).toEqual([]);
  expect(struck).toBeGreaterThan(0);
});
