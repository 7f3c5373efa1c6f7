/** Types of `database.mjs`, which runs before anything is installed. */
export declare const dataFolder: string;

export declare function openDatabase(options: {
  kind: "main" | "test";
  say?: (what: string, seconds: number) => void;
}): Promise<{ url: string; stop: () => Promise<void> }>;
