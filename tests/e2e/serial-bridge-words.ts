import type { SerialOpenOptions } from "@/lib/serial/port";
import type { UnplugOrder } from "@/lib/serial/simulator/far-end";

/** Name under which the page finds the way to the test's process. */
export const BRIDGE = "backporchSerialBridge";

/** What the page says to the test's process; each has its answer. */
export type PageSays =
  /** A new document: whatever the last one had open is gone with it. */
  | { readonly kind: "hello" }
  | { readonly kind: "granted" }
  | { readonly kind: "open"; readonly options: SerialOpenOptions }
  | { readonly kind: "read" }
  | { readonly kind: "write"; readonly bytes: readonly number[] }
  | { readonly kind: "close" };

export type Standing = { readonly isPlugged: boolean; readonly isGranted: boolean };

/** Answers: to `hello` the standing, to `open` and `write` whether it went well, to `read` bytes, or null at the end. */
export type TestSays = Standing | boolean | readonly number[] | null;

/** What the test's process can do in the page. */
export type PageControls = { readonly unplug: (order: UnplugOrder) => void; readonly plugIn: () => void };

declare global {
  interface Window {
    backporchSerialBridge?: (says: PageSays) => Promise<TestSays>;
    backporchSerialControls?: PageControls;
  }
}
