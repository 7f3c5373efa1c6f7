import { connect } from "node:net";
import type { Socket } from "node:net";
import type { PageSays, TestSays } from "./serial-bridge-words";

/** The test's end of the bridge: one socket at a time, and what the user has allowed. */
export class BridgeLine {
  isPlugged = true;
  refuses = false;
  bytesToDevice = 0;
  #isGranted: boolean;
  /** Where the adapter leads; another device may be put at its end. */
  target: { readonly host: string; readonly port: number };
  #awaited: { readonly text: string; readonly sent: () => void } | null = null;
  #socket: Socket | null = null;
  #unread: Buffer[] = [];
  #wakeReader: (() => void) | null = null;

  constructor(target: { readonly host: string; readonly port: number }, isGranted: boolean) {
    this.target = target;
    this.#isGranted = isGranted;
  }

  get isOpen(): boolean {
    return this.#socket !== null;
  }

  /** Resolves when the page sends bytes that have this text in them. */
  async whenSent(text: string): Promise<void> {
    await new Promise<void>((sent) => (this.#awaited = { text, sent }));
    this.#awaited = null;
  }

  /** Ends the connection. A page that reads is told so. */
  cut(): void {
    this.#socket?.destroy();
    this.#socket = null;
    this.#unread = [];
    this.#wake();
  }

  async answer(says: PageSays): Promise<TestSays> {
    switch (says.kind) {
      case "hello":
        this.cut();
        return { isPlugged: this.isPlugged, isGranted: this.#isGranted };
      case "granted":
        this.#isGranted = true;
        return true;
      case "open":
        return !this.refuses && this.isPlugged && this.#open();
      case "read":
        return this.#read();
      case "write":
        return this.#write(Buffer.from(says.bytes));
      case "close":
        this.cut();
        return true;
    }
  }

  #open(): Promise<boolean> {
    this.cut();
    const socket = connect({ ...this.target, noDelay: true });
    return new Promise((resolve) => {
      socket.once("connect", () => {
        this.#socket = socket;
        resolve(true);
      });
      // `close` follows and says all there is to say.
      socket.on("error", () => resolve(false));
      socket.on("data", (bytes: Buffer) => {
        if (this.#socket !== socket) return;
        this.#unread.push(bytes);
        this.#wake();
      });
      socket.on("close", () => {
        if (this.#socket === socket) this.cut();
      });
    });
  }

  async #read(): Promise<readonly number[] | null> {
    const socket = this.#socket;
    if (this.#unread.length === 0 && socket) await new Promise<void>((resolve) => (this.#wakeReader = resolve));
    if (!socket || this.#socket !== socket) return null;
    return [...Buffer.concat(this.#unread.splice(0))];
  }

  #write(bytes: Buffer): Promise<boolean> {
    const socket = this.#socket;
    if (!socket) return Promise.resolve(false);
    this.bytesToDevice += bytes.length;
    if (this.#awaited && bytes.includes(this.#awaited.text)) this.#awaited.sent();
    return new Promise((resolve) => socket.write(bytes, (error) => resolve(!error)));
  }

  #wake(): void {
    const wake = this.#wakeReader;
    this.#wakeReader = null;
    wake?.();
  }
}
