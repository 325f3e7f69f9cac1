import { ChangeDetectionStrategy, Component, inject, input, signal } from '@angular/core';
import { FormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { Router } from '@angular/router';
import { homeOf } from '../../core/guards';
import { asProblem } from '../../core/problem';
import { SessionStore } from '../../core/session';
import { Icon } from '../../shared/icon/icon';
import { Mark } from '../../shared/mark/mark';
import { DemoAccounts, type DemoAccount } from './demo-accounts';
import { Years } from './years';

/** Only a path of our own: an address from elsewhere must not be a way out of here. */
function ownPath(next: string | undefined): string | null {
  return next !== undefined && /^\/(?![/\\])/.test(next) ? next : null;
}

@Component({
  selector: 'ly-sign-in',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [
    DemoAccounts,
    Icon,
    Mark,
    MatButtonModule,
    MatFormFieldModule,
    MatInputModule,
    ReactiveFormsModule,
    Years,
  ],
  templateUrl: './sign-in.html',
  styleUrl: './sign-in.scss',
})
export class SignIn {
  private readonly sessions = inject(SessionStore);
  private readonly router = inject(Router);
  /** Where to go on, from the address. */
  readonly next = input<string>();

  protected readonly form = inject(FormBuilder).nonNullable.group({
    email: ['', [Validators.required, Validators.email]],
    password: ['', Validators.required],
  });
  protected readonly busy = signal(false);
  protected readonly refusal = signal<{ readonly text: string; readonly lockedOut: boolean } | null>(null);
  protected readonly shown = signal(false);

  protected fill(account: DemoAccount): void {
    this.form.setValue({ email: account.email, password: account.password });
    this.refusal.set(null);
  }

  protected async signIn(): Promise<void> {
    if (this.busy()) return;
    this.form.markAllAsTouched();
    if (this.form.invalid) return;
    this.busy.set(true);
    this.refusal.set(null);
    const { email, password } = this.form.getRawValue();
    try {
      const session = await this.sessions.signIn(email.trim(), password);
      await this.router.navigateByUrl(ownPath(this.next()) ?? homeOf(session), { replaceUrl: true });
    } catch (error) {
      const problem = asProblem(error);
      this.refusal.set({ text: problem.message, lockedOut: problem.status === 429 });
    } finally {
      this.busy.set(false);
    }
  }
}
