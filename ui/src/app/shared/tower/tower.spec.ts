import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { Tower } from './tower';
import { TowerHarness } from './tower.harness';
import { towerBlocks, type TowerLayer } from './tower-blocks';

const layer = (name: string, attachment: string, limit: string): TowerLayer => ({
  key: name,
  name,
  attachment,
  limit,
  writtenLine: 0.1,
});

describe('the tower of a programme', () => {
  it('stands to scale, from the ground up', () => {
    const blocks = towerBlocks([
      layer('second', '30000000', '70000000'),
      layer('first', '10000000', '20000000'),
    ]);
    expect(blocks.map(({ name, bottom, height, columns }) => ({ name, bottom, height, columns }))).toEqual([
      { name: 'first', bottom: 0.1, height: 0.2, columns: 1 },
      { name: 'second', bottom: 0.3, height: 0.7, columns: 1 },
    ]);
  });

  it('puts layers over the same ground side by side', () => {
    const blocks = towerBlocks([layer('a', '0', '50'), layer('b', '25', '50'), layer('c', '50', '50')]);
    expect(blocks.map((block) => block.column)).toEqual([0, 1, 0]);
  });

  it('stands as nothing while terms are being typed', () => {
    expect(towerBlocks([layer('a', '12.5x', '')])[0]).toMatchObject({ bottom: 0, height: 0 });
  });

  it('is said in words too', async () => {
    const fixture = TestBed.createComponent(Tower);
    fixture.componentRef.setInput('layers', [layer('First', '10000000', '20000000')]);
    fixture.componentRef.setInput('currency', 'EUR');
    const tower = await TestbedHarnessEnvironment.harnessForFixture(fixture, TowerHarness);
    expect(await tower.layers()).toEqual(['First: 20m EUR in excess of 10m, written line 10.00%']);
  });
});
