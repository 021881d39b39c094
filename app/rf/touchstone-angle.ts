// Pairs of magnitude and angle as complex numbers: cosine and sine of one angle together.

const RADIANS_PER_DEGREE = Math.PI / 180;

/** Coefficients of sine and cosine between -pi/4 and pi/4 (fdlibm, Sun Microsystems 1993, k_sin.c and k_cos.c). */
const S1 = -1.66666666666666324348e-1;
const S2 = 8.33333333332248946124e-3;
const S3 = -1.98412698298579493134e-4;
const S4 = 2.75573137070700676789e-6;
const S5 = -2.50507602534068634195e-8;
const S6 = 1.58969099521155010221e-10;
const C1 = 4.16666666666666019037e-2;
const C2 = -1.38888888888741095749e-3;
const C3 = 2.48015872894767294178e-5;
const C4 = -2.75573143513906633035e-7;
const C5 = 2.0875723212981748279e-9;
const C6 = -1.13596475577881948265e-11;
/** 2/pi, and pi/2 as its first 33 bits and the rest (fdlibm, e_rem_pio2.c). */
const TWO_OVER_PI = 6.36619772367581382433e-1;
const HALF_PI = 1.57079632673412561417;
const HALF_PI_REST = 6.07710050650619224932e-11;

/** Added and taken away again, this rounds to a whole number (1.5 times 2^52). */
const ROUNDER = 6755399441055744;
/** Radians; beyond these, where fdlibm goes other ways, the language's own functions do it. */
const LARGEST_ANGLE = 40;
const SMALLEST_REST = 1e-5;
const LARGEST_REST = Math.PI / 4 - 1e-6;
/** In parts of 2^22, as the upper half of a double has them: where k_cos.c changes its ways, and its last constant. */
const COSINE_UNIT = 2 ** 22;
const COSINE_SPLIT = 0.25 * (2 ** 20 + 0x33333) * 4;
const COSINE_WIDE = 0.78125 * COSINE_UNIT + 2;
const PART_UNIT = 2 ** -24;
const WIDE_PART = 0.28125 * 4 * COSINE_UNIT;

/** By quarter turns modulo 4: what cosine and sine of the whole angle take from those of the rest. */
const COSINE_OF_COSINE = Float64Array.of(1, 0, -1, 0);
const COSINE_OF_SINE = Float64Array.of(0, -1, 0, 1);
/** 1 where there is no quarter turn, by quarter turns modulo 64. */
const UNTURNED = new Float64Array(64);
UNTURNED[0] = 1;

/**
 * Turns magnitudes (in `re`) and angles in degrees (in `im`) into real and imaginary parts, in place.
 *
 * The arithmetic is that of fdlibm, which is also Node's, operation by operation, so that the results are the same doubles
 * in every engine. Reducing an angle once for both functions, without calls and branches, takes half the time.
 */
export function turnIntoParts(re: Float64Array, im: Float64Array): void {
  for (let k = 0; k < re.length; k += 1) {
    const magnitude = re[k] as number;
    const angle = (im[k] as number) * RADIANS_PER_DEGREE;
    const quarters = angle * TWO_OVER_PI + ROUNDER - ROUNDER;
    const turn = ~~quarters;
    const reduced = angle - quarters * HALF_PI;
    const lost = quarters * HALF_PI_REST;
    const x = reduced - lost;
    const tail = reduced - x - lost;
    const distance = Math.abs(x);
    if (!(distance > SMALLEST_REST && distance < LARGEST_REST && Math.abs(angle) < LARGEST_ANGLE)) {
      re[k] = magnitude * Math.cos(angle);
      im[k] = magnitude * Math.sin(angle);
      continue;
    }
    const z = x * x;
    const v = z * x;
    const r = S2 + z * (S3 + z * (S4 + z * (S5 + z * S6)));
    const turned = x - (z * (0.5 * tail - v * r) - tail - v * S1);
    const sine = turned + (x + v * (S1 + z * r) - turned) * (UNTURNED[turn & 63] as number);
    const c = z * (z * (C1 + z * (C2 + z * (C3 + z * (C4 + z * (C5 + z * C6)))))) - x * tail;
    // A quarter of x, its lower half cut off, keeps the subtraction from one exact. Masks, for a branch costs more.
    const upper = ~~(distance * COSINE_UNIT);
    const isNarrow = (upper - COSINE_WIDE) >> 31;
    const kept = ((upper & ~(upper >>> 21) & isNarrow) | (WIDE_PART & ~isNarrow)) & ~((upper - COSINE_SPLIT) >> 31);
    const part = kept * PART_UNIT;
    const cosine = 1 - part - (0.5 * z - part - c);
    const fromCosine = COSINE_OF_COSINE[turn & 3] as number;
    const fromSine = COSINE_OF_SINE[turn & 3] as number;
    re[k] = magnitude * (fromCosine * cosine + fromSine * sine);
    im[k] = magnitude * (fromCosine * sine - fromSine * cosine);
  }
}
