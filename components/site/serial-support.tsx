"use client";

import { useSyncExternalStore } from "react";

const subscribe = () => () => undefined;

/** Whether this browser can talk to a serial port; nothing is said until that is known. */
export function SerialSupport() {
  const support = useSyncExternalStore<"yes" | "no" | "unknown">(
    subscribe,
    () => ("serial" in navigator ? "yes" : "no"),
    () => "unknown",
  );
  const words = { yes: "; this one has it.", no: "; this one does not have it.", unknown: "." } as const;
  return (
    <p className="max-w-[58ch] text-sm text-muted">
      No account is needed for a simulated device. A real one needs a browser with Web Serial{words[support]}
    </p>
  );
}
