import { z } from "zod";
import { etag } from "@/app/api/_http/etag";
import { readsOften } from "@/app/api/_http/limits";
import { respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { readDefinition } from "@/db/queries/drivers";
import { versionParams } from "@/lib/contracts/driver";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "A version's definition as a .driver.json file.",
    params: versionParams,
    response: z.record(z.string(), z.unknown()),
    limit: readsOften,
  },
  async ({ user, params }) => {
    const stored = await readDefinition(db, user, params);
    if (!stored.ok) return respond(stored, { absent: 404 });
    return new Response(`${JSON.stringify(stored.value.definition, null, 2)}\n`, {
      headers: {
        "content-type": "application/json",
        "content-disposition": `attachment; filename="${params.slug}-${params.version}.driver.json"`,
        etag: etag(stored.value.hash),
      },
    });
  },
);
