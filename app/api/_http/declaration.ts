import type { ZodType } from "zod";

/** Who may call: nobody needs an account for "anyone"; admin includes maintainer, maintainer includes owner. */
export type RouteRole = "anyone" | "owner" | "maintainer" | "admin";

export type UserRole = Exclude<RouteRole, "anyone">;

/** The signed-in person, as the session says. */
export type SessionUser = {
  readonly id: string;
  readonly role: UserRole;
  readonly name: string;
  readonly sessionId: string;
};

export type RouteLimit = {
  /** Longest body that is read at all. Default 256 KiB. */
  readonly bodyBytes?: number;
  /** Per user where there is a session, else per address. Default 600, or 120 where nobody needs an account. */
  readonly requestsPerMinute?: number;
  /** Counts each address, session or not, and apart from all other routes: for sign-in and registration. */
  readonly perAddress?: boolean;
  /** Not counted at all: for the health check, which answers without a database. */
  readonly unlimited?: boolean;
};

/** What a route states about itself: the wrapper enforces it and the API description is made from it. */
export type RouteDeclaration<P extends ZodType = ZodType, Q extends ZodType = ZodType, B extends ZodType = ZodType> = {
  readonly role: RouteRole;
  /** One sentence for the API description. */
  readonly summary?: string;
  /** Shape of the path's parameters. */
  readonly params?: P;
  /** Shape of the query: strings, or lists of strings where a name comes twice. */
  readonly query?: Q;
  /** Shape of the JSON body. */
  readonly body?: B;
  /** Content types of a body that is not JSON: the handler gets its bytes. Not together with `body`. */
  readonly rawBody?: readonly string[];
  /** Shape of the answer, for the description. */
  readonly response?: ZodType;
  /** Status of the answer, for the description. 200 unless given. */
  readonly status?: number;
  readonly limit?: RouteLimit;
};

const rank: Readonly<Record<RouteRole, number>> = { anyone: 0, owner: 1, maintainer: 2, admin: 3 };

/** True when `role` includes what `needed` asks for. */
export function includesRole(role: UserRole, needed: RouteRole): boolean {
  return rank[role] >= rank[needed];
}

export const defaultBodyBytes = 256 * 1024;

/** Requests a minute that a declaration allows. */
export function requestsPerMinute(declaration: RouteDeclaration): number {
  return declaration.limit?.requestsPerMinute ?? (declaration.role === "anyone" ? 120 : 600);
}
