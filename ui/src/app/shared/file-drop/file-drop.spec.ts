import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { FileDrop } from './file-drop';
import { FileDropHarness } from './file-drop.harness';

async function open() {
  const fixture = TestBed.createComponent(FileDrop);
  fixture.componentRef.setInput('what', 'a loss table');
  const picked: string[] = [];
  fixture.componentInstance.picked.subscribe((file) => picked.push(file.name));
  return { picked, drop: await TestbedHarnessEnvironment.harnessForFixture(fixture, FileDropHarness) };
}

describe('a place to drop a file', () => {
  it('takes one file and says which', async () => {
    const { drop, picked } = await open();
    expect(await drop.words()).toBe('Drop a loss table here');
    await drop.drop(new File(['event,mean_loss\n'], 'losses.csv'));
    expect(picked).toEqual(['losses.csv']);
    expect(await drop.words()).toBe('losses.csv 1 kB');
  });

  it('takes neither two nor an empty one, and says why', async () => {
    const { drop, picked } = await open();
    await drop.drop(new File(['a'], 'a.csv'), new File(['b'], 'b.csv'));
    expect(await drop.words()).toContain('One file at a time, please.');
    await drop.drop(new File([], 'nothing.csv'));
    expect(await drop.words()).toContain('nothing.csv is empty.');
    expect(picked).toEqual([]);
  });
});
