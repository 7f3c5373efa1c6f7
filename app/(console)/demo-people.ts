import { demoAccounts } from "@/db/demo/accounts";
import { demoId } from "@/db/demo/demo-id";

/** Ids of the invented people: what is theirs says that it is a demo. */
export const demoPeople: readonly string[] = demoAccounts.map(({ email }) => demoId(email));
