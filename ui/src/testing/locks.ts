/** What jsdom lacks: locks that queue, as the browser's do. */
export function provideLocks(): void {
  let last: Promise<unknown> = Promise.resolve();
  const request = <T>(_name: string, ...rest: unknown[]): Promise<T> => {
    const work = rest.at(-1) as () => Promise<T>;
    const mine = last.then(work, work);
    last = mine.catch(() => undefined);
    return mine;
  };
  Object.defineProperty(navigator, 'locks', { configurable: true, value: { request } });
}
