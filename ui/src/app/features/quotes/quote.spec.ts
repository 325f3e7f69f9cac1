import { provideHttpClient } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { provideRouter } from '@angular/router';
import type { Quote } from '@leanyear/contract/quotes';
import { EventStream } from '../../core/event-stream';
import { NEVER } from 'rxjs';
import { QuotePage } from './quote';

const quote: Quote = {
  id: 'q', familyId: 'q', reference: 'LYQ-2027-0001', number: 1, state: 'referred', kind: 'firm', submissionId: 's', programmeId: 'p', programmeName: 'Wind',
  cedant: 'Tidewell Mutual', brokerFirm: { id: 'f', name: 'Quillon Broking' }, contact: { id: 'c', name: 'Quinn Aster', email: 'quinn@quillon.example' }, currency: 'EUR',
  inceptionOn: '2027-01-01', validUntil: '2026-12-20', houseShareOfPremium: '55000', lowestAdequacy: 1.1, author: { id: 'a', name: 'Una Writhe' },
  submittedBy: { id: 'a', name: 'Una Writhe' }, submittedAt: '2026-12-01T10:00:00Z', updatedAt: '2026-12-01T10:00:00Z', version: 2,
  terms: { name: 'Wind', currency: 'EUR', inceptionOn: '2027-01-01', lossTableIds: ['t'], layers: [] },
  layers: [
    { key: 'only', name: 'Only', limit: '10000000', attachment: '5000000', writtenLine: 0.2, premium: '1100000', rateOnLine: 0.11, expectedLoss: 500000, walkAwayPremium: 950000, technicalPremium: 1000000, adequacy: 1.1, lineAmount: '2000000' },
  ],
  runId: 'r', runStanding: 'overtaken', moved: ['the book has moved from version 1 to 2'], note: '', decidedBy: null, decisionNote: null, issuedAt: null, order: null, contractId: null,
  authority: [{ rule: 'largest line', layer: 'Only', figure: '20%', bound: 'a line of 10%', pass: false, message: 'outside' }],
  moves: [
    { move: 'clear', label: 'Clear', allowed: false, reasons: [{ code: 'own referral', message: 'Nobody decides on a referral of their own.' }], needsNote: false },
    { move: 'withdraw', label: 'Withdraw', allowed: true, reasons: [], needsNote: true },
  ],
  history: [{ at: '2026-12-01T10:00:00Z', actor: 'Una Writhe', move: 'submit', from: 'draft', to: 'referred', note: null }],
};

describe('the page of a quote', () => {
  it('offers the moves that the server sends, and says why one is refused and what has moved', async () => {
    TestBed.configureTestingModule({
      providers: [provideHttpClient(), provideHttpClientTesting(), provideRouter([]), { provide: EventStream, useValue: { on: () => NEVER } }],
    });
    const fixture = TestBed.createComponent(QuotePage);
    fixture.componentRef.setInput('quoteId', 'q');
    fixture.detectChanges();
    await Promise.resolve();
    TestBed.inject(HttpTestingController).expectOne('/api/v1/quotes/q').flush(quote);
    await fixture.whenStable();
    const page = fixture.nativeElement as HTMLElement;
    const buttons = [...page.querySelectorAll('button')].map((button) => button.textContent.trim());
    expect(buttons).toContain('Withdraw');
    expect(buttons).not.toContain('Clear');
    expect(page.textContent).toContain('Nobody decides on a referral of their own.');
    expect(page.textContent).toContain('Since then the book has moved from version 1 to 2.');
    expect(page.textContent).toContain('outside');
  });
});
