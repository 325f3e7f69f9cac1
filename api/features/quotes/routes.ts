import * as contract from '../../contract/quotes';
import type { Quote } from '../../contract/quotes';
import { authorityOver } from '../../domain/quote/refer';
import type { Actor } from '../../domain/shared/actor';
import { NotFound } from '../../domain/shared/errors';
import { serve, type ApiRouter } from '../../http/serve';
import { bindQuote } from './bind';
import { tell, type QuoteDeps } from './deps';
import { changeDraft, draftQuote, reviseQuote } from './draft';
import { issueQuote, withdrawQuote } from './issue';
import { clearQuote, declineQuote, returnQuote, submitQuote } from './referral';
import { quoteSummary, quoteView } from './view';

async function shown(deps: QuoteDeps, id: string, actor: Actor): Promise<Quote> {
  const quote = await deps.quotes.read(id);
  if (quote === null) throw new NotFound('quote');
  return quoteView(deps, quote, actor);
}

export function registerQuotes(router: ApiRouter, deps: QuoteDeps): void {
  serve(router, contract.listQuotes, async ({ query }) => (await deps.quotes.list(query)).map(quoteSummary));
  serve(router, contract.readQuote, ({ actor, params }) => shown(deps, params.id, actor));

  serve(router, contract.createQuote, async ({ actor, params, body }) => {
    const id = await draftQuote(deps, actor, params.id, body);
    await tell(deps, id);
    return shown(deps, id, actor);
  });
  serve(router, contract.updateQuote, async ({ actor, params, body, ifMatch }) => {
    await changeDraft(deps, actor, params.id, ifMatch, body);
    await tell(deps, params.id);
    return shown(deps, params.id, actor);
  });
  serve(router, contract.reviseQuote, async ({ actor, params, body }) => {
    const next = await reviseQuote(deps, actor, params.id, body.note);
    await tell(deps, params.id);
    return shown(deps, next, actor);
  });

  /** Moves that need nothing but the quote and a note, and answer the quote as it then stands. */
  const MOVES = [
    [contract.submitQuote, submitQuote],
    [contract.clearQuote, clearQuote],
    [contract.issueQuote, issueQuote],
    [contract.bindQuote, bindQuote],
    [contract.returnQuote, returnQuote],
    [contract.declineQuote, declineQuote],
    [contract.withdrawQuote, withdrawQuote],
  ] as const;
  for (const [spec, act] of MOVES) {
    serve(router, spec, async ({ actor, params, body }) => {
      await act(deps, actor, params.id, body.note);
      await tell(deps, params.id);
      return shown(deps, params.id, actor);
    });
  }

  serve(router, contract.listReferrals, async ({ actor }) => {
    const referred = await deps.quotes.list({ state: 'referred' });
    const items = await Promise.all(
      referred.map(async (quote) => ({
        ...quoteSummary(quote),
        failures: (await authorityOver(deps, quote, quote.submittedBy?.id ?? quote.author.id)).filter(({ pass }) => !pass),
        own: actor.personId === quote.submittedBy?.id || actor.personId === quote.author.id,
      })),
    );
    return items.sort((a, b) => ((a.submittedAt ?? '') < (b.submittedAt ?? '') ? -1 : 1));
  });
}
