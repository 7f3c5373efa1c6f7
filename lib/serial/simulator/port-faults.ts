/** What the system may report while it reads. Windows knows all; POSIX reports only break and parity, and loss of bytes not at all. */
export type ReadFault = "parity" | "framing" | "break" | "overrun" | "system" | "lost";
export type WriteFault = "system" | "lost";

/** Name and text of the exception for each fault. Names: WICG/serial, "readable attribute" and "writable attribute". */
const EXCEPTIONS: Record<ReadFault, readonly [name: string, message: string]> = {
  break: ["BreakError", "A break condition was received."],
  framing: ["FramingError", "A framing error occurred."],
  parity: ["ParityError", "A parity error occurred."],
  overrun: ["BufferOverrunError", "Bytes came faster than they were read, and some are lost."],
  system: ["UnknownError", "The system reports an error that it does not explain."],
  lost: ["NetworkError", "The device has been lost."],
};

export function faultException(fault: ReadFault): DOMException {
  const [name, message] = EXCEPTIONS[fault];
  return new DOMException(message, name);
}
