import path from "node:path";
import type { CDPSession, Page } from "@playwright/test";
import { build } from "vite";
import type { UnplugOrder } from "@/lib/serial/simulator/far-end";
import { BridgeLine } from "./serial-bridge-line";
import { BRIDGE } from "./serial-bridge-words";
import type { Letter, PageSays, TestSays } from "./serial-bridge-words";

export type SerialBridge = {
  /** Pulls the adapter out of the page's machine; the device keeps its power. */
  readonly unplug: (order?: UnplugOrder) => Promise<void>;
  /** Plugs it in again: the page gets a new port object. */
  readonly plugIn: () => Promise<void>;
  /** Another program has the port, or lets it go. */
  readonly refuseOpen: (refuses: boolean) => void;
  /** Ends the byte stream, as a pulled plug at the device's end does. */
  readonly cut: () => void;
  /** Puts another device at the end of the adapter. */
  readonly leadTo: (target: { readonly host: string; readonly port: number }) => void;
  /** Resolves when the page sends bytes that have this text in them. */
  readonly whenSent: (text: string) => Promise<void>;
  readonly isOpen: () => boolean;
  /** Bytes that the page has sent to the device. */
  readonly bytesToDevice: () => number;
};

let pageCode: Promise<string> | null = null;

/** The page's part in one script. */
async function bundle(): Promise<string> {
  const result = await build({
    configFile: false,
    logLevel: "silent",
    resolve: { alias: { "@": path.resolve(import.meta.dirname, "../..") } },
    build: {
      write: false,
      minify: false,
      lib: {
        entry: path.join(import.meta.dirname, "serial-bridge-page.ts"),
        formats: ["iife"],
        name: "backporchSerialPage",
      },
    },
  });
  const [first] = Array.isArray(result) ? result : [result];
  const chunk = first && "output" in first ? first.output[0] : undefined;
  if (chunk?.type !== "chunk") throw new Error("The page's part of the bridge was not built.");
  return chunk.code;
}

/**
 * Calls the page's part of the bridge with a letter.
 * Throws what the page's part throws.
 */
async function post(cdp: CDPSession, letter: Letter<TestSays>): Promise<void> {
  const expression = `void window.backporchSerialHear?.(${JSON.stringify(letter)})`;
  // A page that navigates or is closed cannot be told anything: its document is gone, and the next one says hello.
  const { exceptionDetails } = await cdp.send("Runtime.evaluate", { expression }).catch(() => ({ exceptionDetails: undefined }));
  if (exceptionDetails) throw new Error(exceptionDetails.exception?.description ?? exceptionDetails.text);
}

/**
 * Replaces `navigator.serial` of a page by a port whose bytes go to `npm run sim --tcp`. Call it before the page is opened.
 *
 * The page may connect to its own origin only, so the bytes go through the browser's debugging channel to this process, which
 * holds the socket. They go over a session of their own: `exposeBinding` takes some 3.5 ms of this process for each call.
 * @param isGranted whether the user has let the page use the port already; else `requestPort` gives it
 */
export async function bridgeSerial(
  page: Page,
  target: { readonly host: string; readonly port: number },
  { isGranted = false }: { readonly isGranted?: boolean } = {},
): Promise<SerialBridge> {
  const cdp = await page.context().newCDPSession(page);
  const line = new BridgeLine(target, isGranted, (letter) => post(cdp, letter));
  cdp.on("Runtime.bindingCalled", ({ name, payload }) => {
    if (name === BRIDGE) line.hear(JSON.parse(payload) as Letter<PageSays>);
  });
  // Without the first, the second is forgotten when the page moves to another process.
  await cdp.send("Runtime.enable");
  await cdp.send("Runtime.addBinding", { name: BRIDGE });
  pageCode ??= bundle();
  await page.addInitScript({ content: await pageCode });
  page.on("close", () => line.cut());
  return {
    unplug: async (order = "stream-first") => {
      line.isPlugged = false;
      await line.tell({ kind: "unplug", order });
    },
    plugIn: async () => {
      line.isPlugged = true;
      await line.tell({ kind: "plugIn" });
    },
    refuseOpen: (refuses) => {
      line.refuses = refuses;
    },
    cut: () => line.cut(),
    leadTo: (other) => {
      line.target = other;
    },
    whenSent: (text) => line.whenSent(text),
    isOpen: () => line.isOpen,
    bytesToDevice: () => line.bytesToDevice,
  };
}
