/** Does something again and again with a pause between; trouble is reported and it goes on. */
export function repeating(pauseMilliseconds: number, report: (error: unknown) => void, act: () => Promise<unknown>): { stop(): Promise<void> } {
  let stopped = false;
  let wake: () => void = () => undefined;
  const loop = (async () => {
    while (!stopped) {
      try {
        await act();
      } catch (error) {
        report(error);
      }
      if (stopped) return;
      await new Promise<void>((resolve) => {
        const timer = setTimeout(resolve, pauseMilliseconds);
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
      wake();
      await loop;
    },
  };
}
