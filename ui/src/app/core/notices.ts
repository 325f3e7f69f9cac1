import { Injectable, signal } from '@angular/core';

export interface Notice {
  readonly id: number;
  readonly kind: 'done' | 'fault';
  readonly text: string;
  /** Named in a report to those who run the desk. */
  readonly errorId: string | null;
  readonly action: { readonly label: string; readonly act: () => void } | null;
}

const DONE_MILLISECONDS = 6000;

/** Short words at the foot of the page: what was done goes by itself, what failed stays until it is read. */
@Injectable({ providedIn: 'root' })
export class Notices {
  private readonly list = signal<readonly Notice[]>([]);
  private next = 1;
  readonly shown = this.list.asReadonly();

  done(text: string, action: Notice['action'] = null): void {
    const id = this.add({ kind: 'done', text, errorId: null, action });
    // One with something to press stays until it is pressed or closed.
    if (action === null) setTimeout(() => this.close(id), DONE_MILLISECONDS);
  }

  fault(text: string, errorId: string | null = null, action: Notice['action'] = null): void {
    if (this.list().some((one) => one.text === text && one.errorId === errorId)) return;
    this.add({ kind: 'fault', text, errorId, action });
  }

  close(id: number): void {
    this.list.update((list) => list.filter((one) => one.id !== id));
  }

  private add(notice: Omit<Notice, 'id'>): number {
    const id = this.next++;
    this.list.update((list) => [...list.slice(-3), { ...notice, id }]);
    return id;
  }
}
