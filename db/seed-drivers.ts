import type { Db } from "@/db/client";
import { writeAudit } from "@/db/queries/audit";
import { versionOrder } from "@/db/queries/driver-acts";
import { driver, driverVersion } from "@/db/schema/driver";
import { hashValue } from "@/lib/profile/canonical";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";

/**
 * Publishes the drivers that come with the program where this database lacks them. A version that stands is left as it is,
 * so that a later program with a newer version adds it beside the old one and the owners are told.
 */
export async function seedShippedDrivers(db: Db): Promise<void> {
  await db.transaction(async (tx) => {
    for (const { slug, maker, model, version, ...rest } of shippedDrivers) {
      const definition = { slug, maker, model, version, ...rest };
      await tx.insert(driver).values({ slug, maker, model }).onConflictDoNothing();
      const [made] = await tx
        .insert(driverVersion)
        .values({
          slug,
          version,
          versionOrder: versionOrder(version),
          state: "published",
          origin: "shipped",
          definition,
          hash: hashValue(definition),
          note: "Came with the program.",
          publishedAt: new Date(),
        })
        .onConflictDoNothing()
        .returning({ id: driverVersion.id });
      if (made !== undefined)
        await writeAudit(tx, { actorId: null, action: "driver.ship", subject: made.id, detail: { slug, version } });
    }
  });
}
