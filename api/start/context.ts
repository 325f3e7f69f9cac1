/** What the bootstrap hands to a command once packages, servers' binaries and the build are in place. */
export interface BootstrapContext {
  /** The checkout. */
  readonly root: string;
  /** Where this checkout keeps its servers, secrets and logs; never committed. */
  readonly dataDir: string;
  /** What followed the command on the line. */
  readonly args: readonly string[];
  readonly say: (text: string) => void;
  /** Aborts at the first signal to stop. */
  readonly signal: AbortSignal;
  /** Builds the screens unless they are fresh; rejects when they do not build. */
  readonly buildScreens: () => Promise<void>;
  readonly acquireLock: (path: string) => Promise<RunningLock>;
  /** Who holds a lock and lives. */
  readonly holderOf: (path: string) => { readonly pid: number } | null;
}

/** The lock by which a second start in the same checkout finds the first. */
export interface RunningLock {
  /** Writes the address beside the process id, for the second start to print. */
  readonly publish: (address: string) => void;
  readonly release: () => void;
}
