/** The web port when PORT is not set. */
export declare const DEFAULT_PORT: number;

/** A failure the reader can act on: its message is the whole story, so it is shown without a stack. */
export declare class StackError extends Error {}

/**
 * The port in `text`, 1 to 65535; the default when it is unset or empty.
 * @throws StackError naming `name` and what would be right
 */
export declare function parsePort(text: string | undefined, name?: string): number;

/**
 * Resolves when nothing listens on 127.0.0.1 at `port`.
 * @throws StackError with the way out, phrased for `npm <command>`
 */
export declare function assertPortFree(port: number, command?: string): Promise<void>;

export type Lock = { held: true; release(): Promise<void> } | { held: false; holder: string };

/**
 * Takes the lock `kind` of an existing folder, or says what its holder answers.
 * The kernel gives the lock back however the holder ends.
 * @param about what this holder tells others about itself, asked each time
 */
export declare function holdLock(folder: string, kind: string, about: () => string): Promise<Lock>;

/** Calls `onGone` once when the process that started this one is gone; returns a function that stops watching. */
export declare function watchParent(onGone: () => void, everyMs?: number): () => void;

/** Ends a process group: SIGTERM, then SIGKILL for what is left after `graceMs`. */
export declare function endGroup(groupId: number, graceMs?: number): Promise<void>;
