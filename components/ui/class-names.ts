/** Joins class names; what is false, null or undefined falls out. */
export function classNames(...names: readonly (string | false | null | undefined)[]): string {
  return names.filter((name) => typeof name === "string" && name !== "").join(" ");
}
