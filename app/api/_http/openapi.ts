import { z } from "zod";
import type { ZodType } from "zod";
import type { RouteDeclaration } from "@/app/api/_http/declaration";
import { problemTitles } from "@/app/api/_http/problem";
import { problemSchema } from "@/lib/contracts/problem";

/** The route files by their path in the address (`/api/backups/{id}`), as their modules export them. */
export type RouteModules = Readonly<Record<string, Readonly<Record<string, unknown>>>>;

/** Methods that a route file may export. Source: Next, "Route Handlers". */
export const routeMethods = ["GET", "HEAD", "POST", "PUT", "PATCH", "DELETE", "OPTIONS"] as const;

type JsonObject = Record<string, unknown>;

/**
 * The description of the API, made from what the routes declare, so it cannot say anything else than they do.
 * Source: OpenAPI 3.1.1, whose schemas are JSON Schema 2020-12, as zod writes them.
 */
export function describeApi(modules: RouteModules): JsonObject {
  const paths: JsonObject = {};
  for (const [path, exported] of Object.entries(modules)) {
    const operations: JsonObject = {};
    for (const method of routeMethods) {
      const declaration = declarationOf(exported[method]);
      if (declaration !== null) operations[method.toLowerCase()] = describeOperation(path, method, declaration);
    }
    paths[path] = operations;
  }
  return {
    openapi: "3.1.1",
    info: { title: "Backporch", version: "1" },
    paths,
    components: {
      schemas: { Problem: jsonSchema(problemSchema, "output") },
      securitySchemes: { session: { type: "apiKey", in: "cookie", name: "backporch.session" } },
    },
  };
}

/** What a handler declared; null for anything that is not a route of the wrapper. */
export function declarationOf(handler: unknown): RouteDeclaration | null {
  if (typeof handler !== "function" || !("declaration" in handler)) return null;
  // The cast holds: only the wrapper puts this property on a function (a test reads every route file).
  return handler.declaration as RouteDeclaration;
}

function describeOperation(path: string, method: string, declaration: RouteDeclaration): JsonObject {
  return {
    operationId: `${method.toLowerCase()}${path.replace(/[^A-Za-z0-9]+(\w?)/g, (_, next: string) => next.toUpperCase())}`,
    ...(declaration.summary === undefined ? {} : { summary: declaration.summary }),
    parameters: [...parameters("path", declaration.params), ...parameters("query", declaration.query)],
    ...requestBody(declaration),
    responses: responses(declaration),
    ...(declaration.role === "anyone" ? {} : { security: [{ session: [] }] }),
  };
}

function parameters(place: "path" | "query", schema: ZodType | undefined): JsonObject[] {
  if (schema === undefined) return [];
  const { properties = {}, required = [] } = jsonSchema(schema, "input");
  return Object.entries(properties as JsonObject).map(([name, shape]) => ({
    name,
    in: place,
    required: place === "path" || (required as string[]).includes(name),
    schema: shape,
  }));
}

function requestBody(declaration: RouteDeclaration): JsonObject {
  if (declaration.body !== undefined) {
    const content = { "application/json": { schema: jsonSchema(declaration.body, "input") } };
    return { requestBody: { required: true, content } };
  }
  if (declaration.rawBody === undefined) return {};
  return {
    requestBody: { required: true, content: Object.fromEntries(declaration.rawBody.map((type) => [type, {}])) },
  };
}

function responses(declaration: RouteDeclaration): JsonObject {
  const shape = declaration.response;
  const content =
    shape === undefined ? {} : { content: { "application/json": { schema: jsonSchema(shape, "output") } } };
  return {
    [String(declaration.status ?? 200)]: { description: "Done", ...content },
    default: {
      description: `A problem: ${Object.entries(problemTitles)
        .map(([status, title]) => `${status} ${title}`)
        .join("; ")}`,
      content: { "application/problem+json": { schema: { $ref: "#/components/schemas/Problem" } } },
    },
  };
}

/** JSON Schema of a zod schema; what JSON Schema has no word for (a transformation) is left open. */
function jsonSchema(schema: ZodType, io: "input" | "output"): JsonObject {
  const { $schema: _, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: "any" });
  return rest;
}
