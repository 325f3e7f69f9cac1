import type { Response } from 'express';
import { listenEvents } from '../../contract/runs';
import type { Actor } from '../../domain/shared/actor';
import type { Notice, NoticeBoard } from '../../domain/shared/stream';
import { serve, type ApiRouter } from '../../http/serve';
import { HttpProblem } from '../../http/problem';

const HEARTBEAT_MILLISECONDS = 15_000;
const STREAMS_A_PERSON = 12;

/** Brokers hear of nothing that happens inside the house. */
function concerns(notice: Notice, actor: Actor): boolean {
  return notice.roles?.includes(actor.role) ?? actor.role !== 'broker';
}

export interface Streams {
  /** Ends every open stream, so that the server can stop; browsers come back by themselves. */
  close(): void;
}

export function registerStream(router: ApiRouter, deps: { readonly notices: NoticeBoard }): Streams {
  const open = new Map<Response, string>();

  serve(router, listenEvents, ({ actor, req, res }) => {
    const mine = [...open.values()].filter((personId) => personId === actor.personId).length;
    if (mine >= STREAMS_A_PERSON) throw new HttpProblem(429, 'Too many requests', 'Too many streams are open for this account; close some windows.');
    res.status(200);
    // no-transform keeps compression from holding the stream back.
    res.set({ 'Content-Type': 'text/event-stream', 'Cache-Control': 'no-cache, no-transform', 'X-Accel-Buffering': 'no' });
    res.flushHeaders();
    res.write('retry: 2000\n\n');
    open.set(res, actor.personId);
    const stop = deps.notices.subscribe((notice) => {
      if (!concerns(notice, actor)) return;
      const { roles: _roles, ...said } = notice;
      res.write(`data: ${JSON.stringify(said)}\n\n`);
    });
    const heartbeat = setInterval(() => res.write(': still here\n\n'), HEARTBEAT_MILLISECONDS);
    req.on('close', () => {
      clearInterval(heartbeat);
      stop();
      open.delete(res);
    });
    return undefined;
  });

  return {
    close() {
      for (const res of open.keys()) res.end();
    },
  };
}
