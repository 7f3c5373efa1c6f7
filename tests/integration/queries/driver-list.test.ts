import { eq } from "drizzle-orm";
import { expect, it } from "vitest";
import { createDraft } from "@/db/queries/driver-acts";
import { listDrivers } from "@/db/queries/drivers";
import { driverVersion } from "@/db/schema/driver";
import { user } from "@/db/schema/user";
import { seedShippedDrivers } from "@/db/seed-drivers";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { inTransaction } from "@/tests/integration/helpers/transaction";

it(
  "says of each driver its own versions, protocol and firmware, and of drafts to maintainers alone",
  inTransaction(async (tx) => {
    await seedShippedDrivers(tx);
    const [person] = await tx.insert(user).values({ name: "M", email: "m@example.org" }).returning({ id: user.id });
    if (person === undefined) throw new Error("no person");
    const by = { id: person.id, role: "maintainer" } as const;
    const [first] = shippedDrivers;
    if (first === undefined) throw new Error("no driver is shipped");
    const draft = { ...first, version: "1.1.0" };
    const { slug, version, maker, model } = draft;
    expect((await createDraft(tx, by, { slug, version, maker, model, definition: draft, note: "" })).ok).toBe(true);

    const listed = await listDrivers(tx, by, { limit: 25 });
    if (!listed.ok) throw new Error(listed.error);
    // Compared with the definitions that come with the program.
    for (const shipped of shippedDrivers) {
      const row = listed.value.items.find((one) => one.slug === shipped.slug);
      expect(row?.latest).toMatchObject({
        version: shipped.version,
        protocol: shipped.protocol.kind,
        firmware: { min: shipped.firmware.min, max: shipped.firmware.max },
      });
      expect(row?.latest?.publishedAt).toMatch(/^\d{4}-\d\d-\d\dT[\d:.]+Z$/u);
      expect({ versions: row?.versions, unpublished: row?.unpublished }).toEqual({
        versions: 1,
        unpublished: shipped.slug === slug ? 1 : 0,
      });
    }

    await tx.update(driverVersion).set({ state: "withdrawn", cameFrom: "published", withdrawnAt: new Date(), withdrawnReason: "wrong" }).where(eq(driverVersion.slug, "ternwick-16"));
    const open = await listDrivers(tx, null, { limit: 25 });
    if (!open.ok) throw new Error(open.error);
    expect(open.value.items.find((one) => one.slug === "ternwick-16")?.latest).toBeNull();
    expect(open.value.items.every(({ unpublished, openQuestions }) => unpublished === 0 && openQuestions === 0)).toBe(true);
  }),
);
