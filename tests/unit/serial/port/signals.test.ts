import { describe, expect } from "vitest";
import { benchTest, refusesWith } from "./bench-test";

// Source: WICG/serial, "setSignals() method", "getSignals() method"; the W3C test suite serial/serialPort_setSignals, _getSignals.
const LINES = { dataCarrierDetect: true, clearToSend: false, ringIndicator: true, dataSetReady: false };

describe("setSignals", () => {
  benchTest("is refused on a port that is not open, whatever it is asked", async ({ plug }) => {
    const { port } = await plug();
    await refusesWith("InvalidStateError", port.setSignals({}));
    await refusesWith("InvalidStateError", port.setSignals({ break: true }));
  });

  benchTest("refuses to set nothing", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const before = far.outputSignals;
    await expect(port.setSignals({})).rejects.toThrow(TypeError);
    await expect(port.setSignals({ break: undefined })).rejects.toThrow(TypeError);
    expect(far.outputSignals).toEqual(before);
  });

  benchTest("sets what is named and leaves the rest; DTR goes on with open and off with close", async ({ plug }) => {
    const { port, far } = await plug();
    expect(far.outputSignals).toEqual({ dataTerminalReady: false, requestToSend: false, break: false });
    await port.open({ baudRate: 9600 });
    expect(far.outputSignals).toEqual({ dataTerminalReady: true, requestToSend: false, break: false });
    await port.setSignals({ requestToSend: true });
    expect(far.outputSignals).toEqual({ dataTerminalReady: true, requestToSend: true, break: false });
    await port.setSignals({ dataTerminalReady: false, break: true });
    expect(far.outputSignals).toEqual({ dataTerminalReady: false, requestToSend: true, break: true });
    await port.setSignals({ dataTerminalReady: true });
    await port.close();
    expect(far.outputSignals.dataTerminalReady).toBe(false);
  });

  benchTest("moves the lines one after another: DTR, RTS, break", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    const seen: unknown[] = [];
    far.onOutputSignals = (lines) => seen.push(lines);
    await port.setSignals({ break: true, requestToSend: true, dataTerminalReady: false });
    expect(seen).toEqual([
      { dataTerminalReady: false, requestToSend: false, break: false },
      { dataTerminalReady: false, requestToSend: true, break: false },
      { dataTerminalReady: false, requestToSend: true, break: true },
    ]);
  });

  benchTest("fails with NetworkError where the system cannot, and works again after", async ({ plug }) => {
    const { port, far } = await plug();
    await port.open({ baudRate: 9600 });
    far.failOutputSignals(true);
    await refusesWith("NetworkError", port.setSignals({ break: true }));
    far.failOutputSignals(false);
    await port.setSignals({ break: true });
    expect(far.outputSignals.break).toBe(true);
  });
});

describe("getSignals", () => {
  benchTest("reads the device's lines while the port is open", async ({ plug }) => {
    const { port, far } = await plug();
    await refusesWith("InvalidStateError", port.getSignals());
    await port.open({ baudRate: 9600 });
    far.setInputSignals(LINES);
    expect(await port.getSignals()).toEqual(LINES);
    far.failInputSignals(true);
    await refusesWith("NetworkError", port.getSignals());
    far.failInputSignals(false);
    expect(await port.getSignals()).toEqual(LINES);
    await port.close();
    await refusesWith("InvalidStateError", port.getSignals());
  });
});
