import type { Programmes } from '../../../api/domain/programme/programme';
import { auditMove } from '../../../api/domain/quote/audit-move';
import { lapseQuote, type LapseDeps } from '../../../api/domain/quote/lapse';
import { authorityOver, refer, type AuthorityDeps, type ReferDeps } from '../../../api/domain/quote/refer';
import { IN_THE_HOUSE } from '../../../api/domain/quote/transitions';
import type { Runs } from '../../../api/domain/run/run';
import { startRun } from '../../../api/domain/run/start-run';
import type { Notice } from '../../../api/domain/shared/stream';

export interface RepricingDeps extends AuthorityDeps, ReferDeps, LapseDeps {
  readonly runs: Runs;
  readonly programmes: Programmes;
  readonly engineVersion: string;
  /** Of the book as it stands. */
  readonly bookVersion: () => Promise<number>;
  readonly notify: (notice: Notice) => Promise<void>;
}

const SYSTEM = { personId: null, name: 'system' } as const;

export interface Repricing {
  /** Prices again what a new version of the book has overtaken and is still in the house. */
  bookMoved(version: number): Promise<void>;
  /** Rests a quote on the run that priced it again, and refers it again where authority over it is lost. */
  runEnded(runId: string): Promise<void>;
  lapse(): Promise<void>;
  /** Does what the wakes of both would have done, had none been lost; what is done already is left alone. */
  catchUp(): Promise<void>;
}

async function startFor(deps: RepricingDeps, quoteId: string, version: number): Promise<void> {
  const before = await deps.quotes.read(quoteId);
  const programme = before === null ? null : await deps.programmes.byId(before.programmeId);
  if (programme === null) return;
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await deps.quotes.lock(transaction, quoteId);
    if (quote === null || !IN_THE_HOUSE.includes(quote.state) || quote.run.standing !== 'overtaken') return;
    if (await deps.runs.repriced(transaction, quoteId, version)) return;
    await startRun(deps.runs, deps.engineVersion, transaction, {
      programmeId: quote.programmeId,
      programmeVersion: programme.version,
      terms: quote.terms,
      states: null,
      startedBy: quote.author.id,
      idempotencyKey: null,
      repricesQuoteId: quote.id,
    });
  });
}

async function restOn(deps: RepricingDeps, quoteId: string, runId: string): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await deps.quotes.lock(transaction, quoteId);
    if (quote === null || !IN_THE_HOUSE.includes(quote.state)) return;
    // A later re-pricing may have been faster, and a draft may have been given other terms.
    if (!(await deps.runs.supersedes(transaction, runId, quote.run.id))) return;
    await deps.quotes.rest(transaction, quote, runId);
    const rested = await deps.quotes.lock(transaction, quoteId);
    if (rested === null) return;
    await auditMove(deps, transaction, SYSTEM, rested, 'priced again on the new book', rested.state, null);
    if (rested.state !== 'approved' || rested.decidedBy === null) return;
    const failures = (await authorityOver(deps, rested, rested.decidedBy.id, transaction)).filter(({ pass }) => !pass);
    const why = rested.run.flagged ? 'The price on the new book failed its own check.' : '';
    if (rested.run.flagged || failures.length > 0) await refer(deps, transaction, rested, SYSTEM, failures, why);
  });
}

export function repricing(deps: RepricingDeps): Repricing {
  const priceAgain = async (version: number): Promise<void> => {
    for (const quoteId of await deps.quotes.overtaken(version)) await startFor(deps, quoteId, version);
  };
  const rest = async (runId: string): Promise<void> => {
    const about = await deps.runs.repricing(runId);
    if (about === null || about.state !== 'succeeded') return;
    await restOn(deps, about.quoteId, runId);
    await deps.notify({ topic: 'quote', id: about.quoteId });
  };
  return {
    async bookMoved(version) {
      await priceAgain(version);
      await deps.notify({ topic: 'book', id: String(version) });
    },
    runEnded: rest,
    async catchUp() {
      await priceAgain(await deps.bookVersion());
      for (const runId of await deps.runs.unrested()) await rest(runId);
    },
    async lapse() {
      for (const quoteId of await deps.quotes.lapsing(deps.today())) {
        await lapseQuote(deps, quoteId);
        await deps.notify({ topic: 'quote', id: quoteId });
      }
    },
  };
}
