import type { Notice } from '../domain/shared/stream';
import type { Notices } from './notices';

/** A notice board within one process. */
export function memoryNotices(): Notices {
  const listeners = new Set<(notice: Notice) => void>();
  return {
    publish(notice) {
      for (const listener of listeners) listener(notice);
      return Promise.resolve();
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    check: () => Promise.resolve(),
    close: () => Promise.resolve(),
  };
}
