import type { LayerTermsRecord, ProgrammeTermsRecord } from '../programme/programme';
import type { QuoteKind, QuoteState, RunStanding } from '../vocabulary';

/** Terms as a quote freezes them: those of the programme when its run was made. */
export type FrozenTerms = ProgrammeTermsRecord;
export type FrozenLayer = LayerTermsRecord;

/** What the run under a quote says of a layer, programme currency, for 100%. */
export interface LayerFigures {
  readonly key: string;
  readonly expectedLoss: number;
  readonly walkAwayPremium: number;
  readonly technicalPremium: number;
}

export interface PersonRef {
  readonly id: string;
  readonly name: string;
}

export interface RunUnderQuote {
  readonly id: string;
  readonly programmeId: string;
  readonly succeeded: boolean;
  /** The run's own check failed: it cannot be quoted. */
  readonly flagged: boolean;
  readonly standing: RunStanding;
  readonly moved: readonly string[];
  readonly terms: FrozenTerms;
  readonly layers: readonly LayerFigures[];
  readonly houseCurrency: string;
  /** Units of house currency for one unit of the programme's, frozen in the run's basis. */
  readonly exchangeRate: number;
}

export interface OrderRecord {
  readonly receivedAt: string;
  readonly by: string;
  readonly layers: readonly { readonly key: string; readonly orderShare: number }[];
  readonly note: string;
}

/** One version of a quote with everything that its rules look at. */
export interface QuoteRecord {
  readonly id: string;
  readonly familyId: string;
  readonly reference: string;
  readonly number: number;
  readonly state: QuoteState;
  readonly kind: QuoteKind;
  readonly submissionId: string;
  readonly programmeId: string;
  readonly cedant: { readonly id: string; readonly name: string };
  readonly brokerFirm: PersonRef;
  readonly contact: PersonRef & { readonly email: string };
  readonly terms: FrozenTerms;
  /** Premium for 100% of each layer, programme currency. */
  readonly premiums: readonly { readonly key: string; readonly premium: string }[];
  readonly run: RunUnderQuote;
  readonly validUntil: string;
  readonly note: string;
  readonly author: PersonRef & { readonly email: string };
  readonly submittedBy: PersonRef | null;
  readonly submittedAt: string | null;
  readonly decidedBy: PersonRef | null;
  readonly decisionNote: string | null;
  readonly issuedBy: PersonRef | null;
  readonly issuedAt: string | null;
  readonly order: OrderRecord | null;
  readonly contractId: string | null;
  readonly version: number;
  readonly updatedAt: string;
}
