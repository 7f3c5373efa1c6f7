/** The SQLSTATE and constraint of a failed statement, through the query builder's own wrapping. */
function stateOf(error: unknown): { code?: unknown; constraint?: unknown } {
  const inner = error instanceof Error && error.cause instanceof Error ? error.cause : error;
  return typeof inner === "object" && inner !== null ? inner : {};
}

/** True when a statement broke the unique index `constraint`. Source: PostgreSQL, appendix A, 23505. */
export function isUniqueViolation(error: unknown, constraint: string): boolean {
  const state = stateOf(error);
  return state.code === "23505" && state.constraint === constraint;
}

/** True when one of the migrations' own rules refused a statement. Source: PostgreSQL, appendix A, 23001. */
export function isRestrictViolation(error: unknown): boolean {
  return stateOf(error).code === "23001";
}
