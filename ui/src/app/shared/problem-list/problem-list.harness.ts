import { ComponentHarness, parallel } from '@angular/cdk/testing';

export class ProblemListHarness extends ComponentHarness {
  static readonly hostSelector = 'ly-problem-list';

  async summary(): Promise<string> {
    return (await this.locatorFor('.head p')()).text();
  }

  /** Each row as `line | column | value | problem`. */
  async rows(): Promise<string[]> {
    const cells = await this.locatorForAll('tbody td')();
    const texts = await parallel(() => cells.map((cell) => cell.text()));
    return Array.from({ length: texts.length / 4 }, (_, row) =>
      texts.slice(row * 4, row * 4 + 4).join(' | '),
    );
  }

  async beyond(): Promise<string> {
    const words = await this.locatorForOptional('p.soft')();
    return words === null ? '' : words.text();
  }
}
