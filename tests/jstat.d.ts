/** The parts of the statistics library that tests use as an oracle; it ships no types. */
declare module 'jstat' {
  const jstat: {
    gammafn(x: number): number;
    weibull: { cdf(x: number, scale: number, shape: number): number };
    lognormal: {
      cdf(x: number, mu: number, sigma: number): number;
      inv(p: number, mu: number, sigma: number): number;
    };
    binomial: {
      pdf(k: number, n: number, p: number): number;
      cdf(k: number, n: number, p: number): number;
    };
    poisson: { cdf(k: number, mean: number): number };
    chisquare: { cdf(x: number, degrees: number): number };
    studentt: { inv(p: number, degrees: number): number };
    normal: {
      inv(p: number, mean: number, sd: number): number;
      cdf(x: number, mean: number, sd: number): number;
    };
  };
  export default jstat;
}
