import "server-only";
import type { ParsedDocument } from "@/lib/profile/parse";
import { parseDocument } from "@/lib/profile/parse";
import { fail } from "@/lib/result";
import type { PathMessage, Result } from "@/lib/result";

/** A profile document out of a file's bytes. Errors: what is wrong, by position in the file. */
export function readDocument(bytes: Uint8Array): Result<ParsedDocument, PathMessage[]> {
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch (error) {
    if (!(error instanceof TypeError)) throw error;
    return fail([{ path: "", message: "The file is not UTF-8 text." }]);
  }
  return parseDocument(text);
}
