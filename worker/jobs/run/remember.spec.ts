import { rememberingLast } from './remember';

describe('rememberingLast', () => {
  it('reads the same thing once, another anew, and a failure never', async () => {
    const asked: string[] = [];
    const read = rememberingLast((id) => {
      asked.push(id);
      return id === 'gone' ? Promise.reject(new Error('gone')) : Promise.resolve(`what ${id} is`);
    });
    expect(await Promise.all([read('a'), read('a')])).toEqual(['what a is', 'what a is']);
    await read('b');
    await read('a');
    await expect(read('gone')).rejects.toThrow('gone');
    await expect(read('gone')).rejects.toThrow('gone');
    expect(asked).toEqual(['a', 'b', 'a', 'gone', 'gone']);
  });
});
