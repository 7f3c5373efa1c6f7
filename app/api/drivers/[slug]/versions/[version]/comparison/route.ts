import { readsOften } from "@/app/api/_http/limits";
import { json, respond } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";
import { readDefinition } from "@/db/queries/drivers";
import { comparisonQuery, versionComparison, versionParams } from "@/lib/contracts/driver";
import { diffDefinitions } from "@/lib/serial/driver/diff-definitions";

export const GET = withRoute(
  {
    role: "anyone",
    summary: "What differs from this version of a driver to another, by path.",
    params: versionParams,
    query: comparisonQuery,
    response: versionComparison,
    limit: readsOften,
  },
  async ({ user, params, query }) => {
    const left = await readDefinition(db, user, params);
    const right = await readDefinition(db, user, { slug: params.slug, version: query.with });
    if (!left.ok) return respond(left, { absent: 404 });
    if (!right.ok) return respond(right, { absent: 404 });
    return json({
      left: params.version,
      right: query.with,
      ...diffDefinitions(left.value.definition, right.value.definition),
    });
  },
);
