import "server-only";

/** A name for a downloaded file: ASCII letters and digits with hyphens, at most 60 characters (RFC 6266, appendix D). */
export function fileName(title: string): string {
  const plain = title
    .normalize("NFKD")
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, "-")
    .slice(0, 60)
    .replace(/^-+|-+$/g, "");
  return plain === "" ? "profile" : plain;
}
