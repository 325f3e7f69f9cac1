import { TestBed } from '@angular/core/testing';
import { DeskErrorHandler } from './error-handler';
import { Notices } from './notices';
import { ProblemError } from './problem';

function handle(error: unknown) {
  TestBed.configureTestingModule({ providers: [DeskErrorHandler] });
  TestBed.inject(DeskErrorHandler).handleError(error);
  return TestBed.inject(Notices).shown();
}

describe('an error that nobody caught', () => {
  it('is said with the id under which the server logged it', () => {
    const error = new ProblemError(500, 'Our error', 'Something went wrong on our side.', [], [], 'e-17');
    expect(handle(error)).toMatchObject([
      { kind: 'fault', text: 'Something went wrong on our side.', errorId: 'e-17' },
    ]);
  });

  it('offers to load a page again that is older than its server', () => {
    const shown = handle(new TypeError('Failed to fetch dynamically imported module: /chunk-ABC.js'));
    expect(shown[0]?.action?.label).toBe('Load it again');
  });

  it('is told to the browser where the page itself is at fault', () => {
    const told = jest.fn();
    globalThis.reportError = told;
    const error = new TypeError('x is not a function');
    expect(handle(error)[0]?.text).toContain('Something went wrong on this page');
    expect(told).toHaveBeenCalledWith(error);
  });
});
