import { WAKE_TOPICS, type Wake, type WakeHandlers, type WakeQueue, type WakeTopic } from './port';

/** What every wake queue must do. `open` gives queues on the same store, fresh for each test. */
export function wakeQueueContract(name: string, open: () => Promise<{ queue: WakeQueue; close(): Promise<void> }>): void {
  describe(`wake queue: ${name}`, () => {
    let opened: Awaited<ReturnType<typeof open>>;
    const heard: string[] = [];
    const troubles: string[] = [];
    const work = (over: Partial<WakeHandlers> = {}): void => {
      const hear = (topic: WakeTopic) => (id: string) => Promise.resolve(void heard.push(`${topic} ${id}`));
      const all = Object.fromEntries(WAKE_TOPICS.map((topic) => [topic, hear(topic)])) as Record<WakeTopic, (id: string) => Promise<void>>;
      opened.queue.work(
        { ...all, ...over },
        (error) => troubles.push(error instanceof Error ? error.message : String(error)),
      );
    };
    const until = async (what: () => boolean): Promise<void> => {
      const end = Date.now() + 15_000;
      while (!what()) {
        if (Date.now() > end) throw new Error(`waited in vain; heard: ${heard.join(', ')}`);
        await new Promise((resolve) => setTimeout(resolve, 20));
      }
    };

    beforeEach(async () => {
      heard.length = 0;
      troubles.length = 0;
      opened = await open();
    });
    afterEach(() => opened.close());

    it('gives every wake to its handler, those added before anybody worked too', async () => {
      await opened.queue.add({ id: 'a', topic: 'mail.send', subjectId: '1' });
      work();
      await opened.queue.add({ id: 'b', topic: 'run.start', subjectId: '2' });
      await until(() => heard.length === 2);
      expect([...heard].sort()).toEqual(['mail.send 1', 'run.start 2']);
    });

    it('takes the same wake once', async () => {
      await opened.queue.add({ id: 'same', topic: 'mail.send', subjectId: '1' });
      await opened.queue.add({ id: 'same', topic: 'mail.send', subjectId: '1' });
      work();
      await opened.queue.add({ id: 'other', topic: 'mail.send', subjectId: '2' });
      await until(() => heard.includes('mail.send 2'));
      expect(heard.filter((one) => one === 'mail.send 1')).toHaveLength(1);
    });

    it('tries again after trouble, and reports it', async () => {
      let tries = 0;
      work({
        'mail.send': () => {
          tries += 1;
          return tries < 2 ? Promise.reject(new Error('the post is closed')) : Promise.resolve();
        },
      });
      await opened.queue.add({ id: 'again', topic: 'mail.send', subjectId: '1' });
      await until(() => tries === 2);
      expect(troubles).toEqual(['the post is closed']);
    });

    it('gives the parent of a flow when every child has been done, one of them at the second try', async () => {
      let failures = 0;
      work({
        'run.blocks': (id) => {
          if (id === '2' && failures === 0) {
            failures += 1;
            return Promise.reject(new Error('out of memory'));
          }
          return Promise.resolve(void heard.push(`run.blocks ${id}`));
        },
      });
      const children = ['1', '2', '3'].map((id): Wake => ({ id: `part-${id}`, topic: 'run.blocks', subjectId: id }));
      await opened.queue.addFlow({ id: 'whole', topic: 'run.join', subjectId: 'all' }, children);
      await opened.queue.addFlow({ id: 'whole', topic: 'run.join', subjectId: 'all' }, children);
      await until(() => heard.includes('run.join all'));
      expect([...heard.slice(0, -1)].sort()).toEqual(['run.blocks 1', 'run.blocks 2', 'run.blocks 3']);
      expect(heard.at(-1)).toBe('run.join all');
    });

    it('runs one valuation at a time, and lets mail pass it', async () => {
      let running = 0;
      let most = 0;
      let finish: () => void = () => undefined;
      const gate = new Promise<void>((resolve) => (finish = resolve));
      work({
        'run.start': async (id) => {
          running += 1;
          most = Math.max(most, running);
          await gate;
          running -= 1;
          heard.push(`run.start ${id}`);
        },
      });
      for (const id of ['1', '2', '3']) await opened.queue.add({ id: `run-${id}`, topic: 'run.start', subjectId: id });
      await opened.queue.add({ id: 'mail', topic: 'mail.send', subjectId: '9' });
      await until(() => heard.includes('mail.send 9'));
      finish();
      await until(() => heard.length === 4);
      expect(most).toBe(1);
    });

    it('says that it serves', () => expect(opened.queue.check()).resolves.toBeUndefined());
  });
}
