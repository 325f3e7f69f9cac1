/** The part of jstat that is used; the package brings no types. */
declare module 'jstat' {
  export const jStat: {
    readonly studentt: {
      /** Quantile of Student's law. */
      inv(probability: number, degreesOfFreedom: number): number;
    };
  };
}
