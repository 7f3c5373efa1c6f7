/** Types of `mutants.mjs`. */
export type Mutant = { readonly name: string; readonly file: string; readonly find: string; readonly replace: string; readonly tests: readonly string[] };
export declare const mutants: readonly Mutant[];
