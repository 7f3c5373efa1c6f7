/** Types of `lock.mjs`, which runs before anything is installed. */
export declare function withLock<T>(file: string, act: () => T | Promise<T>): Promise<T>;
