import { createRealClock } from "@/lib/serial/clock/real-clock";
import type { Clock } from "@/lib/serial/clock";
import type { SimulatedFarEnd } from "@/lib/serial/simulator/far-end";
import { SimulatedSerialPort } from "@/lib/serial/simulator/simulated-port";
import { SimulatedMachine, SimulatedSerial } from "@/lib/serial/simulator/simulated-serial";
import type { CreateBench, FarEnd, SerialBench } from "@/tests/fixtures/web-serial-contract";

type AttachInfo = Parameters<SerialBench["attach"]>[0];
type AttachOptions = Parameters<SerialBench["attach"]>[1];

/** The far end of the contract over ours: the names differ in two places, the plug is pulled at the machine. */
function farEnd(machine: SimulatedMachine, far: SimulatedFarEnd): FarEnd {
  return {
    detach: () => machine.detach(far),
    setConnected: (connected) => machine.setConnected(far, connected),
    whenListening: () => far.whenListening(),
    whenTalking: () => far.whenTalking(),
    send: (bytes) => far.send(bytes),
    blast: (bytes) => far.blast(bytes),
    receive: () => far.receive(),
    faultOnRead: (kind) => far.faultOnRead(kind),
    faultOnWrite: (kind) => far.faultOnWrite(kind),
    get outputSignals() {
      return far.outputSignals;
    },
    get onOutputSignals() {
      return far.onOutputSignals;
    },
    set onOutputSignals(listener) {
      far.onOutputSignals = listener ?? null;
    },
    setInputSignals: (signals) => far.setInputSignals(signals),
    failInputSignals: (fail) => far.failInputSignals(fail),
    failOutputSignals: (fail) => far.failOutputSignals(fail),
  };
}

/**
 * The simulated port behind the contract that the W3C test suite `serial/` is driven through.
 * @param clock real time, as the suite needs; our own tests give a virtual one
 */
export function createBenchOn(clock: Clock): SerialBench {
  const machine = new SimulatedMachine(clock);
  const ends = new WeakMap<FarEnd, SimulatedFarEnd>();
  return {
    serial: machine.serial,
    Serial: SimulatedSerial,
    SerialPort: SimulatedSerialPort,
    attach(info: AttachInfo, options: AttachOptions) {
      const far = machine.attach({ identity: info, connected: options?.connected, osBufferBytes: options?.osBuffer });
      const end = farEnd(machine, far);
      ends.set(end, far);
      return end;
    },
    choose: (device) => machine.choose(device ? (ends.get(device) ?? null) : null),
    userGesture: () => machine.userGesture(),
    reset: () => machine.reset(),
  };
}

export const createBench: CreateBench = () => createBenchOn(createRealClock());
