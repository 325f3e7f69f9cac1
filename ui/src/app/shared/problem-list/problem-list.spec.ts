import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import type { FileReport } from '@leanyear/contract/files';
import { ProblemList } from './problem-list';
import { ProblemListHarness } from './problem-list.harness';

async function open(report: FileReport): Promise<ProblemListHarness> {
  const fixture = TestBed.createComponent(ProblemList);
  fixture.componentRef.setInput('report', report);
  return TestbedHarnessEnvironment.harnessForFixture(fixture, ProblemListHarness);
}

const problem = { line: 7, column: 'mean_loss', value: '-3', message: 'must be 0 or more' };

describe('the problems of a refused file', () => {
  it('says each at its place', async () => {
    const list = await open({ fileName: 'losses.csv', rows: 1200, problemCount: 1, problems: [problem] });
    expect(await list.summary()).toBe('1 problem in 1,200 rows of losses.csv. Nothing of it was kept.');
    expect(await list.rows()).toEqual(['7 | mean_loss | -3 | must be 0 or more']);
    expect(await list.beyond()).toBe('');
  });

  it('says how many more there are than it shows', async () => {
    const problems = Array.from({ length: 1000 }, () => problem);
    const list = await open({ fileName: 'losses.csv', rows: 5000, problemCount: 4321, problems });
    expect(await list.rows()).toHaveLength(200);
    expect(await list.beyond()).toBe('The first 200 are shown; the first 1,000 can be downloaded.');
  });
});
