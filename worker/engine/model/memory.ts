/** Where arrays that several threads fill and read come from: shared memory between threads, plain memory in one. */
export type Allocate = (bytes: number) => ArrayBuffer | SharedArrayBuffer;

export const plainMemory: Allocate = (bytes) => new ArrayBuffer(bytes);

export function doubles(allocate: Allocate, length: number): Float64Array {
  return new Float64Array(allocate(8 * length));
}
