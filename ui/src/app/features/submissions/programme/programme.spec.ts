import { Location } from '@angular/common';
import { TestBed } from '@angular/core/testing';
import { openRoom, programmeNamed, settle } from '../testing/submission';
import { routes } from '../routes';

const both = [programmeNamed('a', 'Wind'), programmeNamed('b', 'Quake')];
const room = [{ path: 'submissions', children: routes }];

async function openSheet(query: string) {
  const { opening, server } = await openRoom(room, `/submissions/s/programme${query}`, both);
  const router = await opening;
  await router.fixture.whenStable();
  const page = router.fixture.nativeElement as HTMLElement;
  const input = (label: string): HTMLInputElement => {
    const found = page.querySelector<HTMLInputElement>(`input[aria-label="${label}"]`);
    if (found === null) throw new Error(`No field ${label}.`);
    return found;
  };
  const type = async (label: string, text: string): Promise<void> => {
    const field = input(label);
    field.value = text;
    field.dispatchEvent(new Event('input'));
    field.dispatchEvent(new Event('blur'));
    await settle();
  };
  const press = async (words: string): Promise<void> => {
    const button = [...page.querySelectorAll('button')].find((one) => one.textContent.trim().endsWith(words));
    if (button === undefined) throw new Error(`No button ${words}.`);
    button.click();
    await settle();
  };
  return { page, server, input, type, press };
}

describe('the terms sheet', () => {
  afterEach(() => jest.restoreAllMocks());

  it('saves amounts typed short, to the digit, on the version that was read', async () => {
    const { server, type, press } = await openSheet('?programme=a');
    await type('Limit of layer 1', '12.5m');
    await type('Reinstatements of layer 1', '100 50');
    await press('Save the terms');
    const call = server.expectOne('/api/v1/programmes/a');
    expect(call.request.headers.get('If-Match')).toBe('"1"');
    expect(call.request.body).toMatchObject({ layers: [{ limit: '12500000', reinstatements: [1, 0.5] }] });
  });

  it('sends nothing while a cell is wrong, and says which', async () => {
    const { page, server, type, press } = await openSheet('?programme=a');
    await type('Limit of layer 1', '0');
    await press('Save the terms');
    expect(page.textContent).toContain('Limit: This must be above 0.');
    server.expectNone('/api/v1/programmes/a');
  });

  it('asks before it leaves unsaved terms for another programme, and keeps them if told to', async () => {
    const { input, type, press } = await openSheet('?programme=a');
    await type('Limit of layer 1', '20m');
    const asked = jest.spyOn(globalThis, 'confirm').mockReturnValue(false);
    await press('Quake');
    expect(asked).toHaveBeenCalledTimes(1);
    expect(input('Limit of layer 1').value).toBe('20m');
    expect(TestBed.inject(Location).path()).toContain('programme=a');
  });

  it('never saves the terms of one programme as those of another', async () => {
    const { server, type, press } = await openSheet('?programme=a');
    await type('Limit of layer 1', '20m');
    // As the browser's back button does: the address moves, and nobody was asked.
    const { Router } = await import('@angular/router');
    await TestBed.inject(Router).navigateByUrl('/submissions/s/programme?programme=b');
    await settle();
    await press('Save the terms');
    server.expectNone('/api/v1/programmes/b');
    expect(server.expectOne('/api/v1/programmes/a').request.body).toMatchObject({ name: 'Wind' });
  });

  it('shows both versions when somebody else saved first, and saves ours over theirs when told to', async () => {
    const { page, server, input, type, press } = await openSheet('?programme=a');
    await type('Limit of layer 1', '20m');
    await press('Save the terms');
    server.expectOne('/api/v1/programmes/a').flush({ title: 'Changed meanwhile' }, { status: 412, statusText: '' });
    await settle();
    await settle();
    server.expectOne({ method: 'GET', url: '/api/v1/programmes/a' }).flush(programmeNamed('a', 'Wind, as they have it', 4));
    await settle();
    expect(page.textContent).toContain('Wind, as they have it');
    expect(input('Limit of layer 1').value).toBe('20m');
    await press('Keep mine');
    await press('Save the terms');
    const again = server.expectOne('/api/v1/programmes/a');
    expect(again.request.headers.get('If-Match')).toBe('"4"');
    expect(again.request.body).toMatchObject({ layers: [{ limit: '20000000' }] });
  });

  it('prices the programme just made, though the list read before does not have it', async () => {
    const { server, press } = await openSheet('?programme=new');
    await press('Price this');
    server.expectOne({ method: 'POST', url: '/api/v1/submissions/s/programmes' }).flush(programmeNamed('made', 'Excess of loss'));
    await settle();
    await settle();
    server.expectNone({ method: 'POST', url: '/api/v1/programmes/a/runs' });
    server.expectOne({ method: 'POST', url: '/api/v1/programmes/made/runs' });
  });
});
