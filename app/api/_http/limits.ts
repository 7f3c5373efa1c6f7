/** Requests a minute of one signed-in person. Pages ask for several things at once, and ask again when they return. */
export const readsOften = { requestsPerMinute: 900 } as const;
export const writesOften = { requestsPerMinute: 300 } as const;
/** The journal of a run: a fast device takes several steps in a second. */
export const journalOften = { requestsPerMinute: 3000 } as const;

/** A profile document and what stands around it. */
export const documentBytes = 1_100_000;

/** A suite of conformance takes a processor for some seconds. */
export const suitesSeldom = { requestsPerMinute: 12 } as const;
/** A driver definition and what stands around it; the definition itself has 512 KiB at most. */
export const definitionBytes = 600_000;
