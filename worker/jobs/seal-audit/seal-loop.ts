/**
 * Seals the audit trail again and again, at most `intervalMilliseconds` behind. Trouble is reported and tried again:
 * entries wait unsealed and nothing is lost.
 */
export function startSealing(
  seal: () => Promise<number>,
  onTrouble: (error: unknown) => void,
  intervalMilliseconds = 1000,
): { stop(): Promise<void> } {
  let stopped = false;
  let wake: (() => void) | undefined;
  const loop = (async () => {
    while (!stopped) {
      try {
        await seal();
      } catch (error) {
        onTrouble(error);
      }
      if (stopped) break;
      await new Promise<void>((resolve) => {
        const timer = setTimeout(resolve, intervalMilliseconds);
        wake = () => {
          clearTimeout(timer);
          resolve();
        };
      });
    }
  })();
  return {
    async stop() {
      stopped = true;
      wake?.();
      await loop;
    },
  };
}
