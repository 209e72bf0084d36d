/** Lanczos coefficients, g = 7, n = 9 (Lanczos, SIAM J. Numer. Anal. 1964, B 1, 86; coefficients from memory, tested against factorials). */
const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059, 12.507343278686905,
  -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
] as const;

/** ln Γ(x), x > 0. */
export function logGamma(x: number): number {
  let sum: number = LANCZOS[0];
  for (let i = 1; i < LANCZOS.length; i++) sum += LANCZOS[i] / (x - 1 + i);
  const t = x + 6.5;
  return 0.5 * Math.log(2 * Math.PI) + (x - 0.5) * Math.log(t) - t + Math.log(sum);
}

/**
 * Density of a location-scale Student t, the error model of SCIENCE.md 8.2: heavy tails, so that one bad prediction
 * does not rule a structure out. The constant is worked out once; `cost` allocates nothing.
 */
export class StudentT {
  private readonly constant: number;
  private readonly exponent: number;

  /** @param degreesOfFreedom - ν > 0; small = heavy tails. */
  constructor(readonly degreesOfFreedom: number) {
    const nu = degreesOfFreedom;
    this.constant = logGamma((nu + 1) / 2) - logGamma(nu / 2) - 0.5 * Math.log(nu * Math.PI);
    this.exponent = (nu + 1) / 2;
  }

  /** −ln density of `deviation` (ppm) at the given scale (ppm, > 0); the density is per ppm. */
  cost(deviation: number, scale: number): number {
    const z = deviation / scale;
    return Math.log(scale) - this.constant + this.exponent * Math.log(1 + (z * z) / this.degreesOfFreedom);
  }
}
