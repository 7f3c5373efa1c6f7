import type { Clock } from "@/lib/serial/clock";
import type { CompiledDriver } from "@/lib/serial/driver/compiled";
import type { FaceMaker } from "@/lib/serial/simulator/device-face";
import type { DeviceAnswer, DeviceOperation } from "@/lib/serial/simulator/device-operations";
import { createModbusFace } from "@/lib/serial/simulator/modbus-face";
import { createPacketFace } from "@/lib/serial/simulator/packet-face";
import { createTextFace } from "@/lib/serial/simulator/text-face";

const FACES: Readonly<Record<CompiledDriver["codec"]["kind"], FaceMaker>> = { text: createTextFace, "modbus-rtu": createModbusFace, packet: createPacketFace };

/** Between two requests: longer than any pause within one. */
const PAUSE_MS = 1000;

/** A clock whose time passes when it is told, at once: what a device would do later is done now. */
function createStepClock(): { readonly clock: Clock; finish(): void } {
  let nowMs = 0;
  let timers: { readonly dueMs: number; readonly fire: () => void }[] = [];
  return {
    clock: {
      nowMs: () => nowMs,
      wallMs: () => nowMs,
      after(ms, fire) {
        const timer = { dueMs: nowMs + Math.max(0, ms), fire };
        timers.push(timer);
        return () => (timers = timers.filter((one) => one !== timer));
      },
    },
    finish() {
      // Bound: a request's work sets one timer, and what it does sets none.
      for (let timer = timers.shift(); timer; timer = timers.shift()) {
        nowMs = Math.max(nowMs, timer.dueMs);
        timer.fire();
      }
      nowMs += PAUSE_MS;
    },
  };
}

/**
 * Makes the function that reads a request's bytes as a device of this driver would: the operations that they ask for.
 * @returns none: the device would not understand these bytes
 */
export function createRequestReader(driver: CompiledDriver): (bytes: Uint8Array) => readonly DeviceOperation[] {
  const { clock, finish } = createStepClock();
  let asked: DeviceOperation[] = [];
  // A Modbus device goes on to the next register only after an answer; a line of text needs values to be answered, so it gets none.
  const answer: DeviceAnswer = driver.codec.kind === "text" ? { kind: "silent" } : { kind: "values", values: {}, fields: {} };
  const face = FACES[driver.codec.kind]({
    driver, clock, send: () => undefined,
    perform(operation) {
      asked.push(operation);
      return answer;
    },
  });
  return (bytes) => {
    asked = [];
    face.receive(bytes);
    finish();
    face.reset();
    return asked;
  };
}
