import { sql } from "drizzle-orm";
import { z } from "zod";
import { json } from "@/app/api/_http/respond";
import { withRoute } from "@/app/api/_http/with-route";
import { db } from "@/db/client";

const part = z.enum(["ok", "down", "not-configured"]);
const health = z.object({ status: z.enum(["ok", "down"]), database: part, mail: part, storage: part });

/** Whether this process can do its work. 503 while the database is away. */
export const GET = withRoute(
  { role: "anyone", summary: "State of the server and of what it needs", response: health, limit: { unlimited: true } },
  async () => {
    const database = await db.execute(sql`select 1`).then(
      () => "ok" as const,
      () => "down" as const,
    );
    const state = { status: database, database, mail: "not-configured", storage: "not-configured" } as const;
    return json(state satisfies z.infer<typeof health>, { status: database === "ok" ? 200 : 503 });
  },
);
