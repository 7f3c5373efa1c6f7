import type { DriverDefinition } from "@/lib/serial/driver/definition";

/** Time of one character in ms: start bit, data bits, parity bit, stop bits. 115 200 baud 8N1 gives 0.0868. */
export function characterMs({ baudRate, dataBits, parity, stopBits }: DriverDefinition["transport"]): number {
  return ((1 + dataBits + (parity === "none" ? 0 : 1) + stopBits) / baudRate) * 1000;
}
