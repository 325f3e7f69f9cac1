import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { FileDropHarness } from '../../../shared/file-drop/file-drop.harness';
import { ProblemListHarness } from '../../../shared/problem-list/problem-list.harness';
import { MatSelectHarness } from '@angular/material/select/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { openRoom, settle } from '../testing/submission';
import { routes } from '../routes';

const storms = { id: 'w', name: 'Storms', description: '', released: { id: 'w1', number: 1 }, versions: [] };

async function openLosses() {
  const { opening, server } = await openRoom([{ path: 'submissions', children: routes }], '/submissions/s/losses', []);
  server.expectOne('/api/v1/catalogues').flush([storms]);
  const router = await opening;
  const loader = TestbedHarnessEnvironment.loader(router.fixture);
  return { loader, server, page: router.fixture.nativeElement as HTMLElement };
}

const file = new File(['event,mean_loss\nW1,-5\n'], 'wind.csv', { type: 'text/csv' });

describe('losses of a submission', () => {
  it('asks for the table, its catalogue and its currency before it sends a file', async () => {
    const { loader, server, page } = await openLosses();
    await (await loader.getHarness(FileDropHarness)).drop(file);
    expect(page.textContent).toContain('Name the table, its catalogue and its currency first');
    server.expectNone('/api/v1/submissions/s/loss-tables');
  });

  it('says of a refused file each problem by line and column, with the value and what would be right', async () => {
    const { loader, server } = await openLosses();
    await (await loader.getHarness(MatInputHarness.with({ label: 'Name of the table' }))).setValue('Wind');
    await (await loader.getHarness(MatSelectHarness)).clickOptions({ text: 'Storms, version 1' });
    await (await loader.getHarness(FileDropHarness)).drop(file);
    const call = server.expectOne({ method: 'POST', url: '/api/v1/submissions/s/loss-tables' });
    const sent = call.request.body as FormData;
    expect([sent.get('name'), sent.get('catalogueId'), sent.get('currency')]).toEqual(['Wind', 'w', 'EUR']);
    const problems = [{ line: 2, column: 'mean_loss', value: '-5', message: 'must be a number of 0 or more' }];
    call.flush({ title: 'The file is refused', report: { fileName: 'wind.csv', rows: 1, problemCount: 1, problems } }, { status: 422, statusText: '' });
    await settle();
    expect(await (await loader.getHarness(ProblemListHarness)).rows()).toEqual(['2 | mean_loss | -5 | must be a number of 0 or more']);
  });
});
