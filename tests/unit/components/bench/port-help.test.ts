import { describe, expect, test } from "vitest";
import { hostSystem, portFailureOf, portHelp, type PortFailure } from "@/components/bench/port-help";

describe("help when a port does not open", () => {
  // W3C Web Serial, "requestPort()" and "open()".
  test.each([
    ["NotFoundError", "No port selected by the user.", "not-chosen"],
    ["SecurityError", "Must be handling a user gesture to show a permission request.", "needs-gesture"],
    ["SecurityError", "Access to the feature \"serial\" is disallowed by permissions policy.", "blocked-by-policy"],
    ["NetworkError", "Failed to open serial port.", "open-refused"],
    ["InvalidStateError", "The port is already open.", "already-open"],
    ["UnknownError", "Odd.", "other"],
  ])("%s (%s) means %s", (name, message, code) => {
    expect(portFailureOf(new DOMException(message, name)).code).toBe(code);
  });

  test("names groups and services on Linux, and one program at a time on Windows", () => {
    const refused: PortFailure = { code: "open-refused" };
    expect(portHelp(refused, "linux").causes.join(" ")).toMatch(/dialout.*ModemManager.*snap/u);
    expect(portHelp(refused, "windows").causes.join(" ")).toMatch(/one program at a time/u);
  });

  test("tells systems apart by the user agent", () => {
    expect(hostSystem("Mozilla/5.0 (X11; Linux x86_64)")).toBe("linux");
    expect(hostSystem("Mozilla/5.0 (Linux; Android 14)")).toBe("android");
    expect(hostSystem("Mozilla/5.0 (Macintosh; Intel Mac OS X 10_15_7)")).toBe("macos");
    expect(hostSystem("Mozilla/5.0 (Windows NT 10.0; Win64; x64)")).toBe("windows");
  });

  test("never blames: an unsuited browser still has a way on", () => {
    expect(portHelp({ code: "no-web-serial" }, "linux").causes.join(" ")).toMatch(/simulated device/u);
  });
});
