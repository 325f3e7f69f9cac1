import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal, untracked } from '@angular/core';
import { ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatSelectModule } from '@angular/material/select';
import { Router } from '@angular/router';
import { createProgramme, updateProgramme, type Programme, type ProgrammeTerms } from '@leanyear/contract/programmes';
import { firstValueFrom, type Subscription } from 'rxjs';
import { AddressState } from '../../../core/address-state';
import { Api } from '../../../core/api';
import { Notices } from '../../../core/notices';
import { asProblem } from '../../../core/problem';
import { SessionStore } from '../../../core/session';
import { AmountInput } from '../../../shared/amount/amount-input';
import { askBeforeLeaving } from '../../../shared/confirm/leaving';
import { faultOf, sayFaults } from '../../../shared/form/faults';
import { Icon } from '../../../shared/icon/icon';
import { PercentInput } from '../../../shared/percent-field/percent-input';
import { StatePanel } from '../../../shared/state-panel/state-panel';
import { Tower } from '../../../shared/tower/tower';
import { SubmissionStore } from '../submission-store';
import { layerForm, MOST_LAYERS, nextLayer, overlaps, programmeForm, termsOf, type LayerForm } from './layer-form';

/** The terms sheet of a submission's programmes. */
@Component({
  selector: 'ly-programme',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [
    AmountInput, Icon, MatButtonModule, MatFormFieldModule, MatInputModule, MatSelectModule, PercentInput, ReactiveFormsModule, StatePanel, Tower,
  ],
  templateUrl: './programme.html',
  styleUrl: './programme.scss',
})
export class ProgrammePage {
  private readonly api = inject(Api);
  private readonly router = inject(Router);
  private readonly address = inject(AddressState);
  private readonly notices = inject(Notices);
  protected readonly store = inject(SubmissionStore);
  protected readonly mayWrite = inject(SessionStore).may('submissions.write');
  /** Id of the programme, from the address; `new` for one that is not saved yet. */
  readonly programme = input<string>();

  protected readonly faultOf = faultOf;
  protected readonly most = MOST_LAYERS;
  protected readonly form = signal<ReturnType<typeof programmeForm> | null>(null);
  protected readonly terms = signal<ProgrammeTerms | null>(null);
  protected readonly warnings = computed(() => overlaps(this.terms()?.layers ?? []));
  protected readonly busy = signal(false);
  protected readonly refusal = signal<readonly string[]>([]);
  /** Set when somebody else saved meanwhile: their terms, beside ours. */
  protected readonly theirs = signal<Programme | null>(null);
  /** The programme whose terms the sheet holds, which is not the one in the address while unsaved ones are kept. */
  private edited: Programme | null = null;
  private version = 0;
  private following: Subscription | null = null;

  protected readonly present = computed(() => this.store.programmeAt(this.programme()));

  constructor() {
    effect(() => {
      const present = this.present();
      const started = this.programme() === 'new' ? this.blank() : (present?.terms ?? null);
      untracked(() => {
        if (this.hasUnsaved()) return;
        this.edited = present;
        this.version = present?.version ?? 0;
        this.follow(started);
      });
    });
  }

  hasUnsaved(): boolean {
    return this.form()?.dirty === true;
  }

  private blank(): ProgrammeTerms | null {
    if (!this.store.submission.hasValue() || !this.store.tables.hasValue()) return null;
    const { currency, inceptionOn } = this.store.submission.value();
    const tables = this.store.tables.value().filter((table) => !table.superseded);
    return { name: 'Excess of loss', currency, inceptionOn, lossTableIds: tables.map((table) => table.id), layers: [nextLayer([])] };
  }

  private follow(terms: ProgrammeTerms | null): void {
    this.following?.unsubscribe();
    const form = terms === null ? null : programmeForm(terms);
    this.form.set(form);
    this.terms.set(terms);
    if (form === null) return;
    if (!this.mayWrite) form.disable();
    this.following = form.valueChanges.subscribe(() => this.terms.set(this.read(form)));
  }

  private read(form: ReturnType<typeof programmeForm>): ProgrammeTerms {
    const { name, currency, inceptionOn, lossTableIds } = form.getRawValue();
    return { name, currency, inceptionOn, lossTableIds, layers: form.controls.layers.controls.map(termsOf) };
  }

  /** What is wrong in a layer's cells, in words; read while the form is checked, after a cell was left. */
  protected faultsOf(layer: LayerForm): string[] {
    const named = { name: 'Name', limit: 'Limit', attachment: 'Attachment', annualDeductible: 'Annual deductible', reinstatements: 'Reinstatements', brokerage: 'Brokerage', writtenLine: 'Written line' } as const;
    return Object.entries(named).flatMap(([key, label]) => {
      const control = layer.controls[key as keyof typeof named];
      return control.invalid && control.touched ? [`${label}: ${faultOf(control)}`] : [];
    });
  }

  protected add(): void {
    const form = this.form();
    if (form === null) return;
    form.controls.layers.push(layerForm(nextLayer(this.read(form).layers)));
    form.markAsDirty();
  }

  protected duplicate(layer: LayerForm, at: number): void {
    const form = this.form();
    if (form === null) return;
    const { key, name } = nextLayer(this.read(form).layers);
    form.controls.layers.insert(at + 1, layerForm({ ...termsOf(layer), key, name }));
    form.markAsDirty();
  }

  protected remove(at: number): void {
    this.form()?.controls.layers.removeAt(at);
    this.form()?.markAsDirty();
  }

  protected move(at: number, by: -1 | 1): void {
    const layers = this.form()?.controls.layers;
    const layer = layers?.at(at);
    if (layers === undefined || layer === undefined) return;
    layers.removeAt(at);
    layers.insert(at + by, layer);
    this.form()?.markAsDirty();
  }

  protected async open(id: string): Promise<void> {
    if (this.hasUnsaved()) {
      if (!(await askBeforeLeaving())) return;
      this.form()?.markAsPristine();
    }
    await this.address.set({ programme: id, run: null });
  }

  /** Saves, and answers the programme; null where something stands against it, which is then said. */
  protected async save(): Promise<Programme | null> {
    const form = this.form();
    const submissionId = this.store.id();
    if (form === null || submissionId === undefined || this.busy()) return null;
    form.markAllAsTouched();
    if (form.invalid) {
      this.refusal.set(['Something in the terms is not right: see the cells marked.']);
      return null;
    }
    if (!form.dirty && this.edited !== null) return this.edited;
    this.busy.set(true);
    this.refusal.set([]);
    const body = this.read(form);
    const edited = this.edited;
    try {
      const call =
        edited === null
          ? this.api.send(createProgramme, { params: { id: submissionId }, body })
          : this.api.send(updateProgramme, { params: { id: edited.id }, body, ifMatch: this.version });
      const saved = await firstValueFrom(call);
      // What was typed while the answer was on its way is still to be saved.
      if (JSON.stringify(this.read(form)) === JSON.stringify(body)) form.markAsPristine();
      this.edited = saved;
      this.version = saved.version;
      this.theirs.set(null);
      this.store.keep(saved);
      await this.address.set({ programme: saved.id });
      this.notices.done('Terms saved.');
      return saved;
    } catch (error) {
      const problem = asProblem(error);
      if (problem.status === 412) await this.showTheirs();
      this.refusal.set(sayFaults(form, problem));
      return null;
    } finally {
      this.busy.set(false);
    }
  }

  private async showTheirs(): Promise<void> {
    const edited = this.edited;
    if (edited === null) return;
    const { readProgramme } = await import('@leanyear/contract/programmes');
    this.theirs.set(await firstValueFrom(this.api.send(readProgramme, { params: { id: edited.id } })));
  }

  /** Keeps what is typed here and saves it over theirs with the next save. */
  protected keepMine(): void {
    this.version = this.theirs()?.version ?? this.version;
    this.theirs.set(null);
    this.refusal.set([]);
  }

  protected takeTheirs(): void {
    const theirs = this.theirs();
    if (theirs === null) return;
    this.version = theirs.version;
    this.follow(theirs.terms);
    this.theirs.set(null);
    this.refusal.set([]);
  }

  protected async price(): Promise<void> {
    const saved = await this.save();
    if (saved === null) return;
    await this.router.navigate(['/submissions', saved.submissionId, 'price'], { queryParams: { programme: saved.id, start: 1 } });
  }
}
