import { ChangeDetectionStrategy, Component, inject, signal, type Injector } from '@angular/core';
import { FormControl, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatDialog, MatDialogModule, MatDialogRef } from '@angular/material/dialog';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { Router } from '@angular/router';
import { firstValueFrom, fromEvent } from 'rxjs';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { asProblem } from '../problem';
import { SessionStore } from '../session';
import { RENEWED_AT } from '../sign-in-context';

/** Asks for the password over the page, which stays as it is, with all that was typed. */
@Component({
  selector: 'ly-sign-in-again',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [MatButtonModule, MatDialogModule, MatFormFieldModule, MatInputModule, ReactiveFormsModule],
  templateUrl: './sign-in-again.html',
  styles: `
    .refusal {
      color: var(--ly-fault);
    }

    form {
      display: grid;
      gap: var(--ly-space-4);
      padding-top: var(--ly-space-2);
    }
  `,
})
export class SignInAgain {
  private readonly sessions = inject(SessionStore);
  private readonly dialog = inject<MatDialogRef<SignInAgain, boolean>>(MatDialogRef);
  private readonly router = inject(Router);
  protected readonly person = this.sessions.person;
  protected readonly password = new FormControl('', { nonNullable: true, validators: Validators.required });
  protected readonly refusal = signal('');
  protected readonly busy = signal(false);

  constructor() {
    // Another tab of this browser may have been signed in meanwhile: its cookies are ours too.
    fromEvent<StorageEvent>(window, 'storage')
      .pipe(takeUntilDestroyed())
      .subscribe((event) => {
        if (event.key === RENEWED_AT) this.dialog.close(true);
      });
  }

  protected async signIn(event: Event): Promise<void> {
    event.preventDefault();
    const person = this.person();
    if (person === null || this.busy()) return;
    if (this.password.invalid) {
      this.password.markAsTouched();
      return;
    }
    this.busy.set(true);
    try {
      await this.sessions.signIn(person.email, this.password.value);
      localStorage.setItem(RENEWED_AT, String(Date.now()));
      this.dialog.close(true);
    } catch (error) {
      this.refusal.set(asProblem(error).message);
      this.password.reset();
    } finally {
      this.busy.set(false);
    }
  }

  protected async leave(): Promise<void> {
    this.dialog.close(false);
    this.sessions.forget();
    await this.router.navigateByUrl('/sign-in');
  }
}

/** Whether the person has signed in again. */
export async function signInAgain(injector: Injector): Promise<boolean> {
  const dialog = injector
    .get(MatDialog)
    .open<SignInAgain, undefined, boolean>(SignInAgain, {
      disableClose: true,
      width: '26rem',
      autoFocus: 'input[type=password]',
    });
  return (await firstValueFrom(dialog.afterClosed())) ?? false;
}
