import { provideHttpClient } from '@angular/common/http';
import { TestBed } from '@angular/core/testing';
import { provideLocks } from '../../testing/locks';
import { EventStream, type Told } from './event-stream';
import { SessionStore } from './session';

class FakeSource {
  static opened: FakeSource[] = [];
  onopen: (() => void) | null = null;
  onmessage: ((message: { data: unknown }) => void) | null = null;
  onerror: (() => void) | null = null;
  closed = false;
  constructor(readonly address: string) {
    FakeSource.opened.push(this);
  }
  addEventListener = jest.fn();
  close(): void {
    this.closed = true;
  }
}

/** One browser's channel: what one tab posts, the others hear. */
class FakeChannel {
  static all: FakeChannel[] = [];
  onmessage: ((message: { data: unknown }) => void) | null = null;
  constructor() {
    FakeChannel.all.push(this);
  }
  postMessage(data: unknown): void {
    for (const other of FakeChannel.all) if (other !== this) other.onmessage?.({ data });
  }
  close(): void {
    FakeChannel.all = FakeChannel.all.filter((one) => one !== this);
  }
}

/** Two tabs of one browser: each has its own service, the locks are shared. */
function tab(): { stream: EventStream; told: Told[] } {
  const stream = TestBed.runInInjectionContext(() => new EventStream());
  const told: Told[] = [];
  stream.on('run').subscribe((one) => told.push(one));
  return { stream, told };
}

const RUN = { topic: 'run', id: 'r1' } as const;

describe('the stream of what has moved', () => {
  beforeEach(() => {
    jest.useFakeTimers();
    provideLocks();
    FakeSource.opened = [];
    FakeChannel.all = [];
    Object.assign(globalThis, { EventSource: FakeSource, BroadcastChannel: FakeChannel });
    TestBed.configureTestingModule({ providers: [provideHttpClient()] });
    jest.spyOn(TestBed.inject(SessionStore), 'check').mockResolvedValue();
  });
  afterEach(() => jest.useRealTimers());

  it('is opened by one tab, heard by all, and only of the topics wanted', async () => {
    const [first, second] = [tab(), tab()];
    await jest.advanceTimersByTimeAsync(0);
    expect(FakeSource.opened).toHaveLength(1);
    for (const data of [RUN, { topic: 'mail', id: 'm' }, { topic: 'nonsense' }])
      FakeSource.opened[0]?.onmessage?.({ data: JSON.stringify(data) });
    FakeSource.opened[0]?.onmessage?.({ data: 'not json' });
    expect(first.told).toEqual([RUN]);
    expect(second.told).toEqual([RUN]);
  });

  it('is taken over when the tab that listens closes, and says that something may have been missed', async () => {
    const [first, second] = [tab(), tab()];
    await jest.advanceTimersByTimeAsync(60_000);
    first.stream.stop();
    await jest.advanceTimersByTimeAsync(0);
    expect(FakeSource.opened.map((source) => source.closed)).toEqual([true, false]);
    FakeSource.opened[1]?.onopen?.();
    expect(second.told).toEqual([{ topic: 'resumed' }]);
  });

  it('comes back after a break, later and later, and renews the sign-in on the way', async () => {
    const { told } = tab();
    await jest.advanceTimersByTimeAsync(0);
    FakeSource.opened[0]?.onopen?.();
    FakeSource.opened[0]?.onerror?.();
    await jest.advanceTimersByTimeAsync(1000);
    expect(FakeSource.opened).toHaveLength(2);
    FakeSource.opened[1]?.onerror?.();
    await jest.advanceTimersByTimeAsync(1999);
    expect(FakeSource.opened).toHaveLength(2);
    await jest.advanceTimersByTimeAsync(1);
    FakeSource.opened[2]?.onopen?.();
    expect(told).toEqual([{ topic: 'resumed' }]);
    expect(TestBed.inject(SessionStore).check).toHaveBeenCalledTimes(2);
  });
});
