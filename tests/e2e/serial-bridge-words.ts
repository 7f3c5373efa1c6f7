import type { SerialOpenOptions } from "@/lib/serial/port";
import type { UnplugOrder } from "@/lib/serial/simulator/far-end";

/** Name under which the page finds the way to the test's process. */
export const BRIDGE = "backporchSerialBridge";

/** What the page says to the test's process. Bytes are a text of as many characters, U+0000 to U+00FF. */
export type PageSays =
  /** A new document: whatever the last one had open is gone with it. Answered by `standing`. */
  | { readonly kind: "hello" }
  | { readonly kind: "granted" }
  /** Answered by `opened`; several are answered in their order. */
  | { readonly kind: "open"; readonly options: SerialOpenOptions }
  | { readonly kind: "write"; readonly bytes: string }
  | { readonly kind: "close" };

export type Standing = { readonly isPlugged: boolean; readonly isGranted: boolean };

/** What the test's process says to the page. Bytes as above. */
export type TestSays =
  | ({ readonly kind: "standing" } & Standing)
  | { readonly kind: "opened"; readonly isOpen: boolean }
  /** From the connection that was opened last. */
  | { readonly kind: "bytes"; readonly bytes: string }
  /** That connection is over, and not because the page closed it. */
  | { readonly kind: "end" }
  | { readonly kind: "unplug"; readonly order: UnplugOrder }
  | { readonly kind: "plugIn" };

/** The document that says something, or that it is meant for: while a page navigates, words may reach the wrong one. */
export type Letter<Says> = { readonly document: string; readonly says: Says };

declare global {
  interface Window {
    /** To the test's process: `Letter<PageSays>` as JSON. The browser's debugging channel takes one text and gives no answer. */
    backporchSerialBridge?: (letter: string) => void;
    /** From the test's process. */
    backporchSerialHear?: (letter: Letter<TestSays>) => void;
  }
}
