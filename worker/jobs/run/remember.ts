/**
 * Remembers what was read last. What a run froze never changes, and reading it takes as long as valuing many of its blocks:
 * the parts of a large run, and one that is tried again, find it here.
 */
export function rememberingLast<T>(read: (id: string) => Promise<T>): (id: string) => Promise<T> {
  let last: { readonly id: string; readonly value: Promise<T> } | null = null;
  return (id) => {
    if (last?.id === id) return last.value;
    const value = read(id);
    const own = { id, value };
    last = own;
    value.catch(() => {
      if (last === own) last = null;
    });
    return value;
  };
}
