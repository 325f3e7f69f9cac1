import { inject, Injectable } from '@angular/core';
import { MatDialog } from '@angular/material/dialog';
import { firstValueFrom } from 'rxjs';
import { ConfirmDialog } from './confirm-dialog';

export interface Question {
  readonly title: string;
  /** What follows from it, in a sentence. */
  readonly detail?: string;
  /** Words on the button that does it: a verb. */
  readonly action: string;
  readonly note: 'none' | 'optional' | 'required';
  readonly noteLabel?: string;
  /** It cannot be undone, or somebody loses something. */
  readonly grave?: boolean;
}

export interface Confirmed {
  readonly note: string;
}

/** Asks before what cannot be undone, and why it is done. */
@Injectable({ providedIn: 'root' })
export class Confirm {
  private readonly dialogs = inject(MatDialog);

  /** The note given, or null for not doing it. */
  async ask(question: Question): Promise<Confirmed | null> {
    const dialog = this.dialogs.open<ConfirmDialog, Question, Confirmed>(ConfirmDialog, {
      data: question,
      width: '30rem',
      autoFocus: 'dialog',
    });
    return (await firstValueFrom(dialog.afterClosed())) ?? null;
  }
}
