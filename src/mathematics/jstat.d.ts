/** The part of jstat that `inverse-cdf.ts` uses; the package has no types of its own and a default export only. */
declare module 'jstat' {
  const jstat: {
    readonly normal: {
      cdf(x: number, mean: number, sd: number): number;
      inv(p: number, mean: number, sd: number): number;
    };
    readonly studentt: { inv(p: number, degreesOfFreedom: number): number };
    readonly beta: { inv(p: number, alpha: number, beta: number): number };
  };
  export default jstat;
}
