import { memoryQueue } from './memory';
import { wakeQueueContract } from './queue.contract-suite';

wakeQueueContract('in memory', () => {
  const queue = memoryQueue(20);
  return Promise.resolve({ queue, close: () => queue.close() });
});
