import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { provideHttpClient, withInterceptors } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { provideRouter, Router } from '@angular/router';
import type { Run } from '@leanyear/contract/runs';
import { problems } from '../../../core/interceptors';
import { programmeNamed, settle } from '../testing/submission';
import { DraftQuote } from './draft-quote';

const { terms } = programmeNamed('a', 'Wind');
const layer = { key: 'layer-1', name: 'Layer 1', technicalPremium: 1_249_999.4 };
/** As much of a run as drafting reads. */
const runOf = (over: Partial<Run> = {}): Run =>
  ({ id: 'r', programmeId: 'a', terms, standing: 'current', result: { layers: [layer] }, ...over }) as unknown as Run;

async function open(run = runOf()) {
  TestBed.configureTestingModule({
    providers: [provideHttpClient(withInterceptors([problems])), provideHttpClientTesting(), provideRouter([])],
  });
  const fixture = TestBed.createComponent(DraftQuote);
  fixture.componentRef.setInput('run', run);
  await fixture.whenStable();
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const premium = await loader.getHarness(MatInputHarness.with({ label: 'Premium of Layer 1' }));
  const draft = await loader.getHarness(MatButtonHarness.with({ text: 'Draft the quote' }));
  return { fixture, premium, draft, server: TestBed.inject(HttpTestingController), page: fixture.nativeElement as HTMLElement };
}

describe('drafting a quote from a price', () => {
  it('starts at the technical premium, sends what was typed and goes to the quote', async () => {
    const { premium, draft, server, page } = await open();
    expect(await premium.getValue()).toBe('1.25m');
    await premium.setValue('1.5m');
    expect(page.textContent).toContain('Adequacy 1.200');
    const went = jest.spyOn(TestBed.inject(Router), 'navigate').mockResolvedValue(true);
    await draft.click();
    const call = server.expectOne('/api/v1/programmes/a/quotes');
    expect(call.request.body).toMatchObject({ runId: 'r', kind: 'firm', layers: [{ key: 'layer-1', premium: '1500000' }] });
    call.flush({ id: 'q' });
    await settle();
    expect(went).toHaveBeenCalledWith(['/quotes', 'q']);
  });

  it('keeps what was typed when the same price is read again, and starts anew on another', async () => {
    const { fixture, premium } = await open();
    await premium.setValue('1.5m');
    fixture.componentRef.setInput('run', runOf({ standing: 'overtaken' }));
    await fixture.whenStable();
    expect(await premium.getValue()).toBe('1.5m');
    fixture.componentRef.setInput('run', runOf({ id: 'r2' }));
    await fixture.whenStable();
    const field = (fixture.nativeElement as HTMLElement).querySelector('input');
    expect(field?.value).toBe('1.25m');
  });

  it('says a premium of nothing at its field and asks the server nothing', async () => {
    const { premium, draft, server, page } = await open();
    await premium.setValue('0');
    await draft.click();
    expect(page.textContent).toContain('This must be above 0.');
    server.expectNone('/api/v1/programmes/a/quotes');
  });

  it('is closed on a price that is no longer current, and says so', async () => {
    const { draft, page } = await open(runOf({ standing: 'stale' }));
    expect(await draft.isDisabled()).toBe(true);
    expect(page.textContent).toContain('This price is stale');
  });
});
