/**
 * The device at the far end of a simulated wire: bytes in, bytes out. It knows nothing of ports or browsers.
 *
 * The wire calls `receive` with bytes when their last stop bit is over; what the device `send`s queues behind what it sent
 * before and takes the line's time. A device that needs time (work, busy, commit) takes it from the clock it was made with.
 */
export interface DeviceModel {
  /** Joins the device to a line (a new one replaces the old). Bytes sent while nothing is attached are lost, as on a real line. */
  attach(send: (bytes: Uint8Array) => void): void;
  /** Bytes off the line, in order, in pieces of any size from one byte up. */
  receive(bytes: Uint8Array): void;
  /** Power off and on: working memory becomes what non-volatile memory holds, boot chatter may follow. */
  powerCycle(): void;
  /** A restart of the firmware by itself (watchdog, crash): the same loss, at any moment. */
  restart(): void;
}
