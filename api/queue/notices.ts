import type { NoticeBoard } from '../domain/shared/stream';

/** A board with a way to ask whether it works, and an end. */
export interface Notices extends NoticeBoard {
  check(): Promise<void>;
  close(): Promise<void>;
}
