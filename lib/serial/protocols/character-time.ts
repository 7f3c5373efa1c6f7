import type { SerialOpenOptions } from "@/lib/serial/port";

type Framing = Pick<SerialOpenOptions, "dataBits" | "stopBits" | "parity">;

/** Bits that one character takes: a start bit, the data, parity if any, the stop bits. What is absent is 8N1, as on a port. */
export function bitsPerCharacter({ dataBits = 8, stopBits = 1, parity = "none" }: Framing): number {
  return 1 + dataBits + (parity === "none" ? 0 : 1) + stopBits;
}

/** Time of one character on the line. @returns ms; 115 200 baud 8N1 gives 0.0868 */
export function characterMs(transport: Framing & Pick<SerialOpenOptions, "baudRate">): number {
  return (bitsPerCharacter(transport) * 1000) / transport.baudRate;
}
