import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatCheckboxModule } from '@angular/material/checkbox';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { createFirstGrant, createGrant, endGrant, listGrants, listPeople, updatePerson, type Grant } from '@leanyear/contract/people';
import { firstValueFrom, type Observable } from 'rxjs';
import { Api } from '../../core/api';
import { Notices } from '../../core/notices';
import { asProblem } from '../../core/problem';
import { SessionStore } from '../../core/session';
import { DeskTitle } from '../../core/title';
import { Amount } from '../../shared/amount/amount';
import { AmountField } from '../../shared/amount/amount-field';
import { Confirm } from '../../shared/confirm/confirm';
import { faultOf, sayFaults } from '../../shared/form/faults';
import { DayPipe, SharePipe } from '../../shared/format/pipes';
import { PercentField } from '../../shared/percent-field/percent-field';
import { StatePanel } from '../../shared/state-panel/state-panel';

/** One account with the authority granted to it. */
@Component({
  selector: 'ly-person',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Amount, AmountField, DayPipe, MatButtonModule, MatCheckboxModule, MatFormFieldModule, MatInputModule, PercentField, ReactiveFormsModule, SharePipe, StatePanel],
  templateUrl: './person.html',
})
export class PersonPage {
  private readonly api = inject(Api);
  private readonly session = inject(SessionStore);
  private readonly notices = inject(Notices);
  private readonly confirm = inject(Confirm);
  readonly personId = input.required<string>();
  protected readonly people = this.api.resource(listPeople, () => ({}));
  protected readonly person = computed(() => (this.people.hasValue() ? (this.people.value().find((one) => one.id === this.personId()) ?? null) : null));
  protected readonly mayRead = this.session.may('grants.read');
  protected readonly maySwitch = this.session.may('people.write');
  private readonly mayGrant = this.session.may('grants.write');
  private readonly mayFirst = this.session.may('grants.first');
  protected readonly grants = this.api.resource(listGrants, () => (this.mayRead ? { params: { id: this.personId() } } : undefined));
  protected readonly takesAuthority = computed(() => ['underwriter', 'senior underwriter'].includes(this.person()?.role ?? ''));
  protected readonly own = computed(() => this.session.person()?.id === this.personId());
  /** Whether the reader may grant this person authority: never to oneself, and the administrator to a first senior only. */
  protected readonly grantable = computed(
    () => this.takesAuthority() && !this.own() && (this.mayGrant || (this.mayFirst && this.person()?.role === 'senior underwriter')),
  );
  protected readonly faultOf = faultOf;
  protected readonly refusal = signal<readonly string[]>([]);
  protected readonly form = new FormGroup({
    largestLineAmount: new FormControl('', { nonNullable: true, validators: [Validators.required] }),
    largestLineShare: new FormControl<number | null>(null, [Validators.required]),
    lowestAdequacy: new FormControl(1, { nonNullable: true, validators: [Validators.required, Validators.min(0), Validators.max(10)] }),
    belowWalkAway: new FormControl(false, { nonNullable: true }),
    startsOn: new FormControl(new Date().toISOString().slice(0, 10), { nonNullable: true, validators: [Validators.required] }),
    endsOn: new FormControl(`${new Date().getUTCFullYear() + 1}-12-31`, { nonNullable: true, validators: [Validators.required] }),
  });

  constructor() {
    const title = inject(DeskTitle);
    effect(() => {
      const person = this.person();
      if (person !== null) title.name(person.name);
    });
  }

  protected inForce(grant: Grant): boolean {
    const today = new Date().toISOString().slice(0, 10);
    return grant.endedAt === null && grant.startsOn <= today && today <= grant.endsOn;
  }

  protected async grant(): Promise<void> {
    this.form.markAllAsTouched();
    if (this.form.invalid) return;
    const { largestLineShare, ...rest } = this.form.getRawValue();
    const args = { params: { id: this.personId() }, body: { ...rest, largestLineShare: largestLineShare ?? 0 } };
    await this.act(this.mayGrant ? this.api.send(createGrant, args) : this.api.send(createFirstGrant, args), 'Authority granted.');
  }

  protected async end(grant: Grant): Promise<void> {
    const answer = await this.confirm.ask({ title: 'End this authority?', detail: 'It ends now; what was approved under it stands.', action: 'End it', note: 'none', grave: true });
    if (answer !== null) await this.act(this.api.send(endGrant, { params: { id: grant.id } }), 'Authority ended.');
  }

  protected async switch(active: boolean): Promise<void> {
    const person = this.person();
    if (person === null) return;
    await this.act(this.api.send(updatePerson, { params: { id: person.id }, body: { active }, ifMatch: person.version }), active ? 'Account switched on.' : 'Account switched off; its sessions have ended.');
  }

  private async act(call: Observable<unknown>, done: string): Promise<void> {
    this.refusal.set([]);
    try {
      await firstValueFrom(call);
      this.notices.done(done);
      this.people.reload();
      this.grants.reload();
    } catch (error) {
      this.refusal.set(sayFaults(this.form, asProblem(error)));
    }
  }
}
