import type { Role, StreamTopic } from '../vocabulary';

/** A notice on the event stream: names what moved; the reader fetches it again under its own permissions. */
export interface Notice {
  readonly topic: StreamTopic;
  readonly id: string;
  /** Progress of a run, so that a bar moves without a fetch. */
  readonly progress?: { readonly done: number; readonly total: number; readonly doing: string };
  readonly state?: string;
  /** Roles that may learn of it; brokers are never told of house things. */
  readonly roles?: readonly Role[];
}

/** Publishes to every API process (Redis publish/subscribe, or memory). Losing a notice loses nothing: rows restore the state. */
export interface NoticeBoard {
  publish(notice: Notice): Promise<void>;
  subscribe(listener: (notice: Notice) => void): () => void;
}
