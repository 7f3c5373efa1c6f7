import { AsyncResource } from "node:async_hooks";
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

/** What every object of Playwright has inside; not part of what it promises, so nothing here depends on it but speed. */
type Internals = { readonly _wrapApiCall?: <T>(work: () => Promise<T>, options: { readonly internal: true }) => Promise<T> };

type Evaluate = (expression: string) => ReturnType<typeof evaluate>;

function evaluate(cdp: CDPSession, expression: string) {
  return cdp.send("Runtime.evaluate", { expression });
}

/**
 * A way to evaluate in the page of which the report knows nothing: Playwright makes a step of it out of each call, with a stack
 * trace and a message to its main process, which costs more than the call. Calls from within one of its own calls are no steps.
 */
async function quietEvaluate(cdp: CDPSession): Promise<Evaluate> {
  const within = (cdp as Internals)._wrapApiCall?.bind(cdp) ?? (<T>(work: () => Promise<T>) => work());
  return within(() => Promise.resolve(AsyncResource.bind((expression: string) => evaluate(cdp, expression))), { internal: true });
}

/**
 * Calls the page's part of the bridge with a letter.
 * Throws what the page's part throws.
 */
async function post(evaluateInPage: Evaluate, letter: Letter<TestSays>): Promise<void> {
  // A page that navigates or is closed cannot be told anything: its document is gone, and the next one says hello.
  const answer = await evaluateInPage(`void window.backporchSerialHear?.(${JSON.stringify(letter)})`).catch(() => null);
  const thrown = answer?.exceptionDetails;
  if (thrown) throw new Error(thrown.exception?.description ?? thrown.text);
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
  const evaluateInPage = await quietEvaluate(cdp);
  const line = new BridgeLine(target, isGranted, (letter) => post(evaluateInPage, letter));
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
