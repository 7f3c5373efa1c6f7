import type { RunState } from "@/lib/serial/run/types";

/**
 * Where a run may go from each state. After a loss a whole read can show anything that the requests under way may have
 * left, so the states between ready and the end lead to several others.
 */
export const runTransitions: Readonly<Record<RunState, readonly RunState[]>> = {
  ready: ["writing", "called-off"],
  writing: ["trying", "keeping", "kept", "putting-back", "put-back", "unconfirmed", "mixed"],
  trying: ["keeping", "putting-back", "put-back", "unconfirmed", "mixed"],
  keeping: ["trying", "kept", "putting-back", "put-back", "unconfirmed", "mixed"],
  "putting-back": ["trying", "kept", "put-back", "unconfirmed", "mixed"],
  unconfirmed: ["writing", "trying", "putting-back", "kept", "put-back", "mixed", "left"],
  mixed: ["writing", "trying", "putting-back", "kept", "put-back", "unconfirmed", "left"],
  kept: [],
  "called-off": [],
  "put-back": [],
  left: [],
};
