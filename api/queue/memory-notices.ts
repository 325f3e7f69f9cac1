import type { Notice, NoticeBoard } from '../domain/shared/stream';

/** A notice board within one process. */
export function memoryNotices(): NoticeBoard {
  const listeners = new Set<(notice: Notice) => void>();
  return {
    async publish(notice) {
      for (const listener of listeners) listener(notice);
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}
