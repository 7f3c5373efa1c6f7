/** Types of `processes.mjs`, which runs before anything is installed. */
export type ProcessId = { pid: number; startedAt: string };
export declare function startTimeOf(pid: number): string | null;
export declare function thisProcess(): ProcessId;
export declare function isAlive(id: ProcessId): boolean;
