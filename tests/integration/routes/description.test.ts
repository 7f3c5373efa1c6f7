import { readdirSync } from "node:fs";
import path from "node:path";
import { describe, expect, it } from "vitest";
import { GET } from "@/app/api/openapi.json/route";
import { bodyOf, call } from "@/tests/integration/routes/http";

const folder = path.resolve(import.meta.dirname, "../../../app/api");

describe("the description of the API", () => {
  it("names every route file but its own, each with an answer", async () => {
    const answer = await call(GET);
    expect(answer.status).toBe(200);
    const described = await bodyOf<{ openapi: string; paths: Record<string, Record<string, { responses: object }>> }>(
      answer,
    );
    // OpenAPI 3.1.1, section 4.8.1: the version string of the document.
    expect(described.openapi).toBe("3.1.1");
    const files = readdirSync(folder, { recursive: true, encoding: "utf8" })
      .filter((file) => path.basename(file) === "route.ts" && !file.startsWith("openapi.json"))
      .map((file) => `/api/${path.dirname(file).replaceAll(/\[([^\]]+)\]/g, "{$1}")}`);
    expect(Object.keys(described.paths).sort()).toEqual(files.sort());
    for (const operations of Object.values(described.paths)) {
      expect(Object.keys(operations).length).toBeGreaterThan(0);
      for (const operation of Object.values(operations)) expect(operation.responses).toHaveProperty("default");
    }
  });
});
