import { z } from "zod";

const reading = z.object({ seriesOhm: z.number(), vpp: z.number() });
const wanted = { loadOhm: z.number(), targetVpp: z.number() };

/** A source that is known by its open-circuit level and impedance, or by two readings over one termination. */
export const attenuatorRequest = z.union([
  z.object({ sourceVpp: z.number(), sourceOhm: z.number(), ...wanted }),
  z.object({
    measured: z.tuple([reading, reading]),
    /** What the readings were terminated with; `loadOhm` unless given. */
    readingOhm: z.number().optional(),
    ...wanted,
  }),
]);

export const attenuatorAnswer = z.object({
  sourceVpp: z.number(),
  sourceOhm: z.number(),
  /** The exact resistor; 0 where none is needed, or none helps. */
  seriesOhm: z.number(),
  /** The nearest preferred values, with what each gives at the load. */
  e24: z.array(z.object({ ohm: z.number(), resultVpp: z.number() })),
  /** `too-weak`: only an amplifier helps. */
  outcome: z.enum(["resistor", "direct", "too-weak"]),
  caution: z.string(),
});
