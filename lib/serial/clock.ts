/** Time as the serial layer sees it: real in the browser, virtual in tests. Monotonic, in ms. */
export interface Clock {
  nowMs(): number;
  /** Wall clock for stamps in logs and journals, ms since 1970. Never used for deadlines. */
  wallMs(): number;
  /** Calls `fire` once after `ms`; the returned function takes it back. */
  after(ms: number, fire: () => void): () => void;
}
