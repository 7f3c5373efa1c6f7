import { db } from "@/db/client";
import type { Db } from "@/db/client";

/** Ends the transaction of a test that passed. */
class Undo extends Error {}

/** Runs a test in a transaction that is always undone: `it("…", inTransaction(async (tx) => { … }))`. */
export function inTransaction(test: (tx: Db) => Promise<void>): () => Promise<void> {
  return async () => {
    try {
      await db.transaction(async (tx) => {
        await test(tx);
        throw new Undo();
      });
    } catch (error) {
      if (!(error instanceof Undo)) throw error;
    }
  };
}
