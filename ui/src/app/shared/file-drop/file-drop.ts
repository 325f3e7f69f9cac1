import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  inject,
  input,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { LOCALE } from '../../core/locale';
import { figure } from '../format/numbers';
import { Icon } from '../icon/icon';

/** A size in megabytes at most; smaller ones in kilobytes. */
function sizeOf(bytes: number, locale: string): string {
  return bytes < 1e6
    ? `${figure(Math.max(1, bytes / 1e3), locale)} kB`
    : `${figure(bytes / 1e6, locale, 1)} MB`;
}

/** One file, dropped here or picked from the machine. What is in it is the server's to judge. */
@Component({
  selector: 'ly-file-drop',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [Icon],
  templateUrl: './file-drop.html',
  styleUrl: './file-drop.scss',
  host: {
    '[class.over]': 'over()',
    '(dragover)': 'drag($event)',
    '(dragleave)': 'over.set(false)',
    '(drop)': 'drop($event)',
  },
})
export class FileDrop {
  private readonly locale = inject(LOCALE);
  private readonly chooser = viewChild.required<ElementRef<HTMLInputElement>>('chooser');
  /** What kind of file, in words: “a loss table”. */
  readonly what = input.required<string>();
  /** What it should hold, in a line. */
  readonly hint = input('');
  readonly accept = input('.csv,text/csv');
  readonly disabled = input(false);
  readonly picked = output<File>();

  protected readonly over = signal(false);
  protected readonly file = signal<{ readonly name: string; readonly size: string } | null>(null);
  protected readonly fault = signal('');

  protected choose(): void {
    this.chooser().nativeElement.click();
  }

  protected drag(event: DragEvent): void {
    event.preventDefault();
    this.over.set(!this.disabled());
  }

  protected drop(event: DragEvent): void {
    event.preventDefault();
    this.over.set(false);
    if (!this.disabled()) this.take([...(event.dataTransfer?.files ?? [])]);
  }

  protected changed(): void {
    const chooser = this.chooser().nativeElement;
    this.take([...(chooser.files ?? [])]);
    // So that the same file, mended, can be picked again.
    chooser.value = '';
  }

  private take(files: readonly File[]): void {
    const [file] = files;
    if (file === undefined) return;
    this.fault.set(
      files.length > 1 ? 'One file at a time, please.' : file.size === 0 ? `${file.name} is empty.` : '',
    );
    if (this.fault() !== '') return;
    this.file.set({ name: file.name, size: sizeOf(file.size, this.locale) });
    this.picked.emit(file);
  }
}
