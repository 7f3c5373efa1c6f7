import { connect } from "node:net";
import type { Socket } from "node:net";
import type { Letter, PageSays, TestSays } from "./serial-bridge-words";

/** The test's end of the bridge: one socket at a time, and what the user has allowed. */
export class BridgeLine {
  isPlugged = true;
  refuses = false;
  bytesToDevice = 0;
  #isGranted: boolean;
  /** Where the adapter leads; another device may be put at its end. */
  target: { readonly host: string; readonly port: number };
  readonly #send: (letter: Letter<TestSays>) => Promise<void>;
  /** The page's document that said hello last; words of and to any other one count for nothing. */
  #document = "";
  #awaited: { readonly text: string; readonly sent: () => void } | null = null;
  #socket: Socket | null = null;

  /** @param send carries a letter to the page; in the order of the calls, and never rejecting because the page is gone */
  constructor(
    target: { readonly host: string; readonly port: number },
    isGranted: boolean,
    send: (letter: Letter<TestSays>) => Promise<void>,
  ) {
    this.target = target;
    this.#isGranted = isGranted;
    this.#send = send;
  }

  get isOpen(): boolean {
    return this.#socket !== null;
  }

  /** Resolves when the page sends bytes that have this text in them. */
  async whenSent(text: string): Promise<void> {
    await new Promise<void>((sent) => (this.#awaited = { text, sent }));
    this.#awaited = null;
  }

  /** Ends the connection. A page that has it open is told so. */
  cut(): void {
    if (this.#hangUp()) void this.tell({ kind: "end" });
  }

  /** Says something to the document that the page shows now. Resolves when it was said; to no document, at once. */
  async tell(says: TestSays): Promise<void> {
    if (this.#document !== "") await this.#send({ document: this.#document, says });
  }

  /** Takes what the page says. */
  hear({ document, says }: Letter<PageSays>): void {
    if (says.kind === "hello") {
      this.#hangUp();
      this.#document = document;
      void this.tell({ kind: "standing", isPlugged: this.isPlugged, isGranted: this.#isGranted });
    }
    if (document !== this.#document) return;
    if (says.kind === "granted") this.#isGranted = true;
    else if (says.kind === "open") this.#open();
    else if (says.kind === "write") this.#write(Buffer.from(says.bytes, "latin1"));
    else if (says.kind === "close") this.#hangUp();
  }

  #open(): void {
    const document = this.#document;
    const answer = (isOpen: boolean): void => void this.#send({ document, says: { kind: "opened", isOpen } });
    if (this.refuses || !this.isPlugged) return answer(false);
    this.cut();
    const socket = connect({ ...this.target, noDelay: true });
    let isAnswered = false;
    socket.once("connect", () => {
      isAnswered = true;
      // Nobody is left to use it.
      if (document !== this.#document) return void socket.destroy();
      this.#socket = socket;
      answer(true);
    });
    // `close` follows and says all there is to say.
    socket.on("error", () => undefined);
    socket.on("data", (bytes: Buffer) => {
      if (this.#socket === socket) void this.tell({ kind: "bytes", bytes: bytes.toString("latin1") });
    });
    socket.on("close", () => {
      if (!isAnswered) answer(false);
      if (this.#socket === socket) this.cut();
    });
  }

  #write(bytes: Buffer): void {
    const socket = this.#socket;
    if (!socket) return;
    this.bytesToDevice += bytes.length;
    if (this.#awaited && bytes.includes(this.#awaited.text)) this.#awaited.sent();
    // A write that fails ends the socket: the page is told of the end.
    socket.write(bytes);
  }

  /** @returns whether there was a connection */
  #hangUp(): boolean {
    const socket = this.#socket;
    this.#socket = null;
    socket?.destroy();
    return socket !== null;
  }
}
