import { inject, Injectable, type OnDestroy } from '@angular/core';
import { STREAM_TOPICS, type StreamTopic } from '@leanyear/vocabulary';
import { filter, Subject, type Observable } from 'rxjs';
import { SessionStore } from './session';

/** Something has moved: read it again to see it. */
export interface DeskEvent {
  readonly topic: StreamTopic;
  readonly id: string;
  /** Of a run: how far it is. */
  readonly progress?: { readonly done: number; readonly total: number; readonly doing: string };
  readonly state?: string;
}

/** The stream was broken for a while: whatever is shown may be old. */
export interface Resumed {
  readonly topic: 'resumed';
}

export type Told = DeskEvent | Resumed;

const CHANNEL = 'leanyear.events';
const SHORTEST_WAIT_MILLISECONDS = 1000;
const LONGEST_WAIT_MILLISECONDS = 30_000;
/** A stream that opens later than this after the page wanted it may have missed something. */
const PROMPT_MILLISECONDS = 3000;

function toldBy(data: unknown): DeskEvent | null {
  if (typeof data !== 'string') return null;
  try {
    const parsed = JSON.parse(data) as Partial<DeskEvent> | null;
    return parsed !== null && STREAM_TOPICS.some((topic) => topic === parsed.topic)
      ? (parsed as DeskEvent)
      : null;
  } catch {
    return null;
  }
}

/**
 * What the server says has moved. A browser allows six connections a host, so one tab listens for all: tabs queue for a
 * lock, its holder opens the stream and passes on what it hears; when it closes, the next in the queue takes over.
 */
@Injectable({ providedIn: 'root' })
export class EventStream implements OnDestroy {
  private readonly sessions = inject(SessionStore);
  private readonly heard = new Subject<Told>();
  private channel: BroadcastChannel | null = null;
  private giveUp: AbortController | null = null;

  /** Events of these topics, and `resumed` after a gap. */
  on(...topics: readonly StreamTopic[]): Observable<Told> {
    this.start();
    return this.heard.pipe(filter((told) => told.topic === 'resumed' || topics.includes(told.topic)));
  }

  stop(): void {
    this.giveUp?.abort();
    this.channel?.close();
    this.giveUp = null;
    this.channel = null;
  }

  ngOnDestroy(): void {
    this.stop();
  }

  private start(): void {
    if (this.giveUp !== null) return;
    const giveUp = (this.giveUp = new AbortController());
    const wanted = Date.now();
    this.channel = new BroadcastChannel(CHANNEL);
    this.channel.onmessage = (message: MessageEvent<Told>) => this.heard.next(message.data);
    navigator.locks
      .request('leanyear.events', { signal: giveUp.signal }, () => this.listen(giveUp.signal, wanted))
      .catch((error: unknown) => {
        if (!giveUp.signal.aborted) throw error;
      });
  }

  private tell(told: Told): void {
    this.heard.next(told);
    this.channel?.postMessage(told);
  }

  /** Holds the stream open, and the lock with it, until told to stop. */
  private async listen(stop: AbortSignal, wanted: number): Promise<void> {
    let wait = SHORTEST_WAIT_MILLISECONDS;
    let before = false;
    while (!stop.aborted) {
      await this.listenOnce(stop, () => {
        wait = SHORTEST_WAIT_MILLISECONDS;
        if (before || Date.now() - wanted > PROMPT_MILLISECONDS) this.tell({ topic: 'resumed' });
        before = true;
      });
      if (stop.aborted) return;
      await new Promise((resolve) => setTimeout(resolve, wait));
      wait = Math.min(wait * 2, LONGEST_WAIT_MILLISECONDS);
      // A stream cannot renew its sign-in; asking who is signed in does it for it.
      await this.sessions.check().catch(() => null);
    }
  }

  /** One connection, from opening to its end. */
  private listenOnce(stop: AbortSignal, onOpen: () => void): Promise<void> {
    return new Promise((resolve) => {
      const source = new EventSource('/api/v1/events');
      const hear = (message: MessageEvent<unknown>): void => {
        const told = toldBy(message.data);
        if (told !== null) this.tell(told);
      };
      const end = (): void => {
        source.close();
        stop.removeEventListener('abort', end);
        resolve();
      };
      source.onopen = onOpen;
      source.onmessage = hear;
      for (const topic of STREAM_TOPICS) source.addEventListener(topic, hear);
      source.onerror = end;
      stop.addEventListener('abort', end);
    });
  }
}
