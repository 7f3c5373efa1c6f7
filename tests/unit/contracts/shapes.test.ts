import { describe, expect, it } from "vitest";
import type { z } from "zod";
import { registration, signIn } from "@/lib/contracts/account";
import { deviceLimitsSchema } from "@/lib/contracts/check";
import { findingSchema } from "@/lib/contracts/finding";
import { lineText, pageQuery } from "@/lib/contracts/page";
import { runStateSchema } from "@/lib/contracts/run";
import type { journalEntrySchema } from "@/lib/contracts/run";
import { checkProfile } from "@/lib/profile/check/check-profile";
import type { Finding } from "@/lib/profile/finding";
import type { DeviceLimits } from "@/lib/profile/limits";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { deviceLimits } from "@/lib/serial/limits";
import type { JournalEntry, RunState } from "@/lib/serial/run/types";
import { runTransitions } from "@/db/schema/run-transitions";
import { standardRaster } from "@/lib/timing/standards";

/** Compiles only while what the contract gives can be handed to the core that it is made for, and back. */
type Fits<From, To> = From extends To ? true : never;
const agree: readonly true[] = [
  true satisfies Fits<z.infer<typeof journalEntrySchema>, JournalEntry>,
  true satisfies Fits<z.infer<typeof runStateSchema>, RunState>,
  true satisfies Fits<RunState, z.infer<typeof runStateSchema>>,
  true satisfies Fits<z.infer<typeof deviceLimitsSchema>, DeviceLimits>,
  true satisfies Fits<z.infer<typeof findingSchema>, Finding>,
];

describe("contracts", () => {
  it("take the limits of every shipped driver without loss", () => {
    expect(agree).toHaveLength(5);
    expect(shippedDrivers.length).toBeGreaterThan(0);
    for (const driver of shippedDrivers) {
      const limits = JSON.parse(JSON.stringify(deviceLimits(driver, "1.0"))) as unknown;
      expect(deviceLimitsSchema.parse(limits)).toEqual(limits);
    }
  });

  it("take every finding of a check without loss", () => {
    const timing = standardRaster("480p60").timing;
    const findings = checkProfile({
      document: {
        format: "backporch-profile",
        version: 1,
        modes: [{ key: "a", timing }],
        slots: [{ number: 1, mode: "a", placement: { heightPct: 140 } }],
      },
      device: shippedDrivers.map((driver) => deviceLimits(driver))[0],
      screen: { name: "S", bands: [{ lineRateHz: [15_000, 16_000], fieldRateHz: [48, 62] }] },
    });
    expect(findings.length).toBeGreaterThan(3);
    for (const finding of findings) {
      const sent = JSON.parse(JSON.stringify(finding)) as unknown;
      expect(findingSchema.parse(sent)).toEqual(sent);
    }
  });

  it("let a run move on from every state that is not an end, and from no end", () => {
    const ends = runStateSchema.options.filter((state) => runTransitions[state].length === 0);
    // profile.md's run: kept, called off, put back and left are the ends.
    expect(ends.sort()).toEqual(["called-off", "kept", "left", "put-back"]);
    for (const targets of Object.values(runTransitions)) expect(targets).not.toContain("ready");
  });

  it("tell addresses apart without regard to case, and keep a password as it was typed", () => {
    expect(signIn.parse({ email: " Wenna@Example.ORG ", password: " spaces count " })).toEqual({
      email: "wenna@example.org",
      password: " spaces count ",
    });
    expect(registration.safeParse({ name: "W", email: "a@example.org", password: "123456789" }).success).toBe(false);
    expect(registration.safeParse({ name: "W", email: "a@example.org", password: "1234567890" }).success).toBe(true);
    expect(registration.safeParse({ name: "W", email: "a@example.org", password: "x".repeat(201) }).success).toBe(
      false,
    );
  });

  it("take no control characters and no blank where a line of text is asked for", () => {
    for (const wrong of ["", "   ", "a\nb", "a\u0000b", "a\u0085b", "x".repeat(11)])
      expect(lineText(10).safeParse(wrong).success).toBe(false);
    expect(lineText(10).parse("  Käse 5 µs ")).toBe("Käse 5 µs");
  });

  it("bound the length of a page", () => {
    expect(pageQuery.parse({})).toEqual({ limit: 25 });
    for (const limit of ["0", "101", "1.5", "many"]) expect(pageQuery.safeParse({ limit }).success).toBe(false);
  });
});
