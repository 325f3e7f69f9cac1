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
}

/** The lock by which a second start in the same checkout finds the first. */
export interface RunningLock {
  /** Writes the address beside the process id, for the second start to print. */
  readonly publish: (address: string) => void;
  readonly release: () => void;
}
