import { simpleParser } from 'mailparser';
import { listMails, readMail } from '../../contract/house';
import type { Actor } from '../../domain/shared/actor';
import { NotFound } from '../../domain/shared/errors';
import { serve, type ApiRouter } from '../../http/serve';
import type { MailScope, PostRoom } from './port';

/** The administrator looks after the post and sees all of it; everyone else sees what they have part in. */
function scopeOf(actor: Actor): MailScope {
  return actor.role === 'administrator' ? { everybody: true } : { personId: actor.personId };
}

export function registerPostRoom(router: ApiRouter, deps: { readonly postRoom: PostRoom }): void {
  serve(router, listMails, ({ actor, query }) => deps.postRoom.list(scopeOf(actor), query));

  serve(router, readMail, async ({ actor, params }) => {
    const found = await deps.postRoom.read(scopeOf(actor), params.id);
    if (found === null) throw new NotFound('mail');
    if (found.raw === null) return { ...found.summary, text: null, html: null };
    const parsed = await simpleParser(found.raw);
    return { ...found.summary, text: parsed.text ?? null, html: typeof parsed.html === 'string' ? parsed.html : null };
  });
}
