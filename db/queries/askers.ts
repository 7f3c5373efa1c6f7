/** Somebody who is signed in, as far as drivers ask. */
export type Maintaining = { readonly id: string; readonly role: "owner" | "maintainer" | "admin" };

/** Who asks: nobody, or somebody with a role. */
export type Asker = Maintaining | null;

/** Drafts, candidates and what is attached to questions are there for maintainers alone; an admin is one too. */
export const isMaintainer = (asker: Asker): boolean => asker !== null && asker.role !== "owner";
