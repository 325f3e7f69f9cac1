import { type ComponentFixture, TestBed } from '@angular/core/testing';
import type { ExplainedYear } from '@leanyear/contract/runs';
import { TellingYears } from './telling-years';

const year = (state: number, event: string): ExplainedYear => ({
  state,
  occurrences: [{ event, peril: 'wind', region: 'Eskerholm', day: 25, loss: 672e6, net: 672e6, counted: 100e6, paid: 100e6, reinstatement: 1 }],
  counted: 100e6,
  payoff: 100e6,
  reinstatement: 1,
  bookLoss: 392e6,
  capital: 0.7788,
  hunger: 5.159,
  contribution: 1031.8,
});

describe('TellingYears', () => {
  const opened = (tellingYears: readonly ExplainedYear[]): ComponentFixture<TellingYears> => {
    const fixture = TestBed.createComponent(TellingYears);
    fixture.componentRef.setInput('layer', { key: 'a', tellingYears });
    fixture.componentRef.setInput('states', 500_000);
    fixture.componentRef.setInput('currency', 'EUR');
    fixture.componentRef.setInput('houseCurrency', 'EUR');
    fixture.detectChanges();
    return fixture;
  };
  const text = (fixture: ComponentFixture<TellingYears>): string => (fixture.nativeElement as HTMLElement).textContent.replace(/\s+/g, ' ');

  it('tells the leanest year at first, and the one that is picked', () => {
    const fixture = opened([year(37_188, 'W05695'), year(5251, 'Q03073')]);
    expect(text(fixture)).toContain('W05695, wind, Eskerholm');
    expect(text(fixture)).not.toContain('Q03073');
    const [, second] = (fixture.nativeElement as HTMLElement).querySelectorAll<HTMLButtonElement>('button.pick');
    second?.click();
    fixture.detectChanges();
    expect(text(fixture)).toContain('Year 5,252 of 500,000');
    expect(text(fixture)).toContain('Q03073, wind, Eskerholm');
    expect(second?.getAttribute('aria-pressed')).toBe('true');
  });

  it('says so where no year pays', () => expect(text(opened([]))).toContain('No simulated year pays.'));
});
