import type { FieldPath, FieldValues, UseFormSetError } from "react-hook-form";
import { ApiProblem } from "@/components/ui/api";

/**
 * Puts the server's complaints beside the fields that they are about.
 *
 * @returns true when each complaint found its field, so that nothing is left to say elsewhere
 */
export function showFieldErrors<T extends FieldValues>(
  error: unknown,
  fields: readonly FieldPath<T>[],
  setError: UseFormSetError<T>,
): boolean {
  if (!(error instanceof ApiProblem)) return false;
  const complaints = error.problem.errors ?? [];
  const placed = complaints.filter(({ path, message }) => {
    const field = fields.find((candidate) => candidate === path);
    if (field !== undefined) setError(field, { message });
    return field !== undefined;
  });
  return complaints.length > 0 && placed.length === complaints.length;
}
