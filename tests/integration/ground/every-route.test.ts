import { readdirSync } from "node:fs";
import path from "node:path";
import { describe, expect, it } from "vitest";
import { declarationOf, describeApi, routeMethods } from "@/app/api/_http/openapi";
import { isRoute } from "@/app/api/_http/with-route";
import { dataFolder } from "@/scripts/database.mjs";

const root = path.dirname(dataFolder);
const routeFiles = readdirSync(path.join(root, "app"), { recursive: true, encoding: "utf8" })
  .filter((file) => /(^|\/)route\.(ts|tsx|js|mjs)$/.test(file))
  .sort();

/** What a route file may export beside its methods. Source: Next, "Route Segment Config". */
const segmentSettings = ["dynamic", "runtime", "revalidate", "maxDuration"];

async function load(file: string): Promise<Record<string, unknown>> {
  return (await import(path.join(root, "app", file))) as Record<string, unknown>;
}

describe("every route", () => {
  it("stands under app/api", () => {
    expect(routeFiles.filter((file) => !file.startsWith("api/"))).toEqual([]);
    expect(routeFiles.length).toBeGreaterThan(0);
  });

  it.each(routeFiles)("%s is declared in the wrapper", async (file) => {
    const exported = await load(file);
    const names = Object.keys(exported).filter((name) => !segmentSettings.includes(name));
    expect(names.filter((name) => !routeMethods.some((method) => method === name))).toEqual([]);
    expect(names.filter((name) => !isRoute(exported[name]))).toEqual([]);
    expect(names).not.toEqual([]);
  });

  it.each(routeFiles)("%s states its path's parameters and what a write takes", async (file) => {
    const exported = await load(file);
    const hasParameters = /\[.+\]/.test(file);
    for (const method of routeMethods) {
      const declaration = declarationOf(exported[method]);
      if (declaration === null) continue;
      expect(declaration.params !== undefined, `${method} ${file} params`).toBe(hasParameters);
      expect(declaration.body !== undefined && declaration.rawBody !== undefined, `${method} ${file} body`).toBe(false);
    }
  });

  it("can be described", async () => {
    const modules = Object.fromEntries(
      await Promise.all(
        routeFiles.map(async (file) => {
          const address = `/${path.dirname(file).replaceAll(/\[([^\]]+)\]/g, "{$1}")}`;
          return [address, await load(file)] as const;
        }),
      ),
    );
    const described = describeApi(modules) as { paths: Record<string, object> };
    expect(Object.keys(described.paths)).toHaveLength(routeFiles.length);
    expect(JSON.parse(JSON.stringify(described))).toEqual(described);
  });
});
