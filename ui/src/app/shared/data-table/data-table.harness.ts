import { ComponentHarness, parallel, TestKey } from '@angular/cdk/testing';

export class DataTableHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-data-table';
  private readonly rowElements = this.locatorForAll('tr[mat-row]');

  /** Each row's cells, joined by ` | `. */
  async rows(): Promise<string[]> {
    const columns = (await this.headers()).length;
    const cells = await this.locatorForAll('td[mat-cell]')();
    const texts = await parallel(() => cells.map((cell) => cell.text()));
    return Array.from({ length: texts.length / columns }, (_, row) =>
      texts.slice(row * columns, (row + 1) * columns).join(' | '),
    );
  }

  async headers(): Promise<string[]> {
    const headers = await this.locatorForAll('th')();
    return parallel(() => headers.map((header) => header.text()));
  }

  async sortBy(header: string): Promise<void> {
    const index = (await this.headers()).indexOf(header);
    const button = (await this.locatorForAll('th .mat-sort-header-container')())[index];
    if (button === undefined) throw new Error(`No column is headed ${header}.`);
    await button.click();
  }

  async find(text: string): Promise<void> {
    const box = await this.locatorFor('input[type=search]')();
    await box.clear();
    await box.sendKeys(text);
  }

  async count(): Promise<string> {
    return (await this.locatorFor('.tools [role=status]')()).text();
  }

  async press(row: number, key: 'down' | 'up' | 'enter'): Promise<void> {
    const keys = { down: TestKey.DOWN_ARROW, up: TestKey.UP_ARROW, enter: TestKey.ENTER };
    await (await this.rowElements())[row]?.sendKeys(keys[key]);
  }

  /** Which row the keyboard is on, from 0; -1 for none. */
  async focusedRow(): Promise<number> {
    const rows = await this.rowElements();
    return (await parallel(() => rows.map((row) => row.isFocused()))).indexOf(true);
  }

  async showMore(): Promise<void> {
    await (await this.locatorFor('.more')()).click();
  }
}
