/** What kind of system the browser runs on, as far as serial ports differ there. */
export type HostSystem = "linux" | "macos" | "windows" | "android" | "other";

/** Why no port came open, as far as the browser tells. */
export type PortFailure =
  | { readonly code: "no-web-serial" }
  | { readonly code: "insecure-context" }
  | { readonly code: "not-chosen" }
  | { readonly code: "blocked-by-policy" }
  | { readonly code: "needs-gesture" }
  | { readonly code: "open-refused" }
  | { readonly code: "already-open" }
  | { readonly code: "other-device"; readonly found: string; readonly wanted: string }
  | { readonly code: "silent"; readonly detail: string }
  | { readonly code: "other"; readonly detail: string };

export type PortHelp = { readonly title: string; readonly causes: readonly string[]; readonly retry: boolean };

/**
 * System from `navigator.userAgent`; a wrong guess only shows another system's causes.
 * Features, never the browser's name, decide what is possible.
 */
export function hostSystem(userAgent: string): HostSystem {
  if (/Android/u.test(userAgent)) return "android";
  if (/Windows/u.test(userAgent)) return "windows";
  if (/Mac OS X|Macintosh/u.test(userAgent)) return "macos";
  return /Linux|X11|CrOS/u.test(userAgent) ? "linux" : "other";
}

/**
 * The failure that an exception of `requestPort()` or `open()` stands for.
 *
 * Source: W3C Web Serial, "requestPort()" and "open()": NotFoundError when the chooser is dismissed, SecurityError
 * without activation or by policy, NetworkError with one message for every refusal of the system.
 */
export function portFailureOf(error: unknown): PortFailure {
  const name = error instanceof Error || error instanceof DOMException ? error.name : "";
  const detail = error instanceof Error ? error.message : String(error);
  switch (name) {
    case "NotFoundError": return { code: "not-chosen" };
    case "SecurityError": return /activation|gesture/iu.test(detail) ? { code: "needs-gesture" } : { code: "blocked-by-policy" };
    case "NetworkError": return { code: "open-refused" };
    case "InvalidStateError": return { code: "already-open" };
    default: return { code: "other", detail };
  }
}

const OPEN_REFUSED: Record<HostSystem, readonly string[]> = {
  linux: [
    "Another program or another browser tab has the port open. Close it there.",
    "You may not be in the group that owns serial ports: dialout on Debian and Ubuntu, uucp on Arch. Join it, then sign in again.",
    "ModemManager or brltty may have taken the adapter as it was plugged in. Stop that service, or unplug and plug in again after a minute.",
    "A browser installed as a snap is kept from serial ports until it is allowed: snap connect chromium:raw-usb.",
  ],
  macos: [
    "Another program or another browser tab has the port open. Close it there.",
    "The adapter shows up twice, as cu and tty. Choose the one that begins with cu.",
    "The adapter's maker may require a system extension, allowed under Privacy and Security.",
  ],
  windows: [
    "Another program or another browser tab has the port open. Windows lends a port to one program at a time.",
    "The adapter has no working driver. Look for a mark on it in Device Manager under Ports.",
    "The port went away and came back under another number. Unplug, wait a moment, plug in, choose it again.",
  ],
  android: [
    "Another app has the adapter. Close it, then plug the adapter in again.",
    "The phone may not power the adapter. Use a powered hub.",
  ],
  other: ["Another program or another browser tab has the port open. Close it there."],
};

/** What to say and to try, by cause and system. */
export function portHelp(failure: PortFailure, system: HostSystem): PortHelp {
  switch (failure.code) {
    case "no-web-serial":
      return { title: "This browser has no Web Serial.", retry: false, causes: [
        "Desktop browsers built on Chromium have it, and so has Firefox on the desktop from version 151. Safari has not.",
        "Backups, the library and a simulated device work here all the same.",
      ] };
    case "insecure-context":
      return { title: "Serial ports need a secure address.", retry: false, causes: [
        "Over a local network, plain HTTP hides Web Serial. Open Backporch over HTTPS, or on the same machine as http://127.0.0.1.",
      ] };
    case "not-chosen":
      return { title: "No port was chosen.", retry: true, causes: [
        "If the list was empty, the adapter isn't seen by the system: check the cable and the adapter's driver.",
      ] };
    case "blocked-by-policy":
      return { title: "This page may not use serial ports.", retry: true, causes: [
        "A site setting or your organisation blocks them. Look at the site settings beside the address.",
        "Inside a frame of another site, open Backporch in a tab of its own.",
      ] };
    case "needs-gesture":
      return { title: "The browser wants a click first.", retry: true, causes: ["Press the button once more."] };
    case "open-refused":
      return { title: "The port would not open.", retry: true, causes: OPEN_REFUSED[system] };
    case "already-open":
      return { title: "The port is open already.", retry: true, causes: [
        "This page, or one before a reload, still holds it. Disconnect, or close the other tab.",
      ] };
    case "other-device":
      return { title: "Another device answered.", retry: true, causes: [
        `${failure.found} is connected, and this needs ${failure.wanted}. Nothing was written to it.`,
      ] };
    case "silent":
      return { title: "The port is open, but the device doesn't answer.", retry: true, causes: [
        failure.detail,
        "The cable may need its transmit and receive lines crossed (a null-modem adapter), or must not have them crossed.",
        "Another model may be connected. Choose its driver.",
        "The device may be starting. Wait until its picture is there.",
      ] };
    case "other":
      return { title: "The port would not open.", retry: true, causes: [failure.detail, ...OPEN_REFUSED[system]] };
  }
}
