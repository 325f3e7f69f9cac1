import { provideHttpClient, withInterceptors } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { provideRouter, withComponentInputBinding, type Routes } from '@angular/router';
import { RouterTestingHarness } from '@angular/router/testing';
import type { Programme } from '@leanyear/contract/programmes';
import type { LossTable, SubmissionSummary } from '@leanyear/contract/submissions';
import { Subject } from 'rxjs';
import { EventStream, type Told } from '../../../core/event-stream';
import { problems } from '../../../core/interceptors';
import { SessionStore } from '../../../core/session';
import { sessionOf } from '../../../../testing/session';

const una = { id: 'una', name: 'Una Writhe' };

export const submission: SubmissionSummary = {
  id: 's', reference: 'LYS-2027-0001', cedant: { id: 'c', name: 'Tidewell Mutual', territory: 'Sandmark' }, brokerFirm: { id: 'f', name: 'Quillon Broking' },
  contact: { id: 'q', name: 'Quinn Aster', email: 'quinn@quillon.example' }, treatyYear: 2027, inceptionOn: '2027-01-01', currency: 'EUR', state: 'open', note: '',
  owner: una, programmeCount: 2, lossTableCount: 1, version: 1,
};

export const table: LossTable = {
  id: 't', submissionId: 's', name: 'Wind', number: 1, catalogue: { id: 'w', name: 'Storms', versionId: 'w1', versionNumber: 1 }, currency: 'EUR', basisNote: '',
  fileName: 'wind.csv', contentHash: 'h', rowCount: 200, yearlyMean: 900_000, uploadedBy: una, uploadedAt: '2026-11-02T10:00:00Z', superseded: false,
};

export function programmeNamed(id: string, name: string, version = 1): Programme {
  const layer = { key: 'layer-1', name: 'Layer 1', limit: '10000000', attachment: '5000000', annualDeductible: '0', reinstatements: [1], brokerage: 0.1, writtenLine: 0.05 };
  const terms = { name, currency: 'EUR', inceptionOn: '2027-01-01', lossTableIds: ['t'], layers: [layer] };
  return { id, submissionId: 's', terms, version, updatedAt: '2026-11-03T10:00:00Z', latestRunId: null };
}

/** Lets what waits for an answer go on. */
export const settle = (): Promise<void> => new Promise((resolve) => setTimeout(resolve, 20));

/** The room of a submission at an address, as an underwriter sees it, with its submission, tables and programmes answered. */
export async function openRoom(routes: Routes, url: string, programmes: readonly Programme[]) {
  const told = new Subject<Told>();
  TestBed.configureTestingModule({
    providers: [
      provideHttpClient(withInterceptors([problems])),
      provideHttpClientTesting(),
      provideRouter(routes, withComponentInputBinding()),
      { provide: EventStream, useValue: { on: () => told } },
    ],
  });
  const server = TestBed.inject(HttpTestingController);
  TestBed.inject(SessionStore).take(sessionOf('underwriter'));
  const opening = RouterTestingHarness.create(url);
  await settle();
  server.expectOne('/api/v1/submissions/s').flush(submission);
  server.expectOne('/api/v1/submissions/s/loss-tables').flush([table]);
  server.expectOne('/api/v1/submissions/s/programmes').flush(programmes);
  await settle();
  return { opening, server, told };
}
