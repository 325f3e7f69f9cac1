import { inject, Injectable, type ErrorHandler } from '@angular/core';
import { Notices } from './notices';
import { asProblem } from './problem';
import { RELOAD } from './reload';

/** What a reload mends: the page is older than the server it talks to. */
const STALE_PAGE = /dynamically imported module|Importing a module script failed/;

/** The last place an error can come to: it is said, with the id under which the server logged it. */
@Injectable()
export class DeskErrorHandler implements ErrorHandler {
  private readonly notices = inject(Notices);
  private readonly reload = inject(RELOAD);

  handleError(error: unknown): void {
    const thrown: unknown = error instanceof Error && 'rejection' in error ? error.rejection : error;
    const problem = asProblem(thrown);
    if (STALE_PAGE.test(problem.message)) {
      this.notices.fault('Leanyear has been renewed since this page was opened.', null, {
        label: 'Load it again',
        act: this.reload,
      });
      return;
    }
    if (problem.status === -1) reportError(thrown);
    // Asking again for the password was given up: the page says so itself.
    if (problem.status === 401) return;
    this.notices.fault(
      problem.status === -1
        ? 'Something went wrong on this page. If it goes on, load it again.'
        : problem.message,
      problem.errorId,
    );
  }
}
