/** Constants the functions here share, to the last bit; `Math` holds them too, but only six of its members are used in `cells/`. */
export const PI = 3.141592653589793;
export const SQRT_2 = 1.4142135623730951;
export const INV_SQRT_PI = 0.5641895835477563;
export const INV_SQRT_2PI = 0.3989422804014327;
/** ln √(2π). */
export const LN_SQRT_2PI = 0.9189385332046728;
/** Spacing of doubles at 1. */
export const EPSILON = 2.220446049250313e-16;
/** Half-width of a 95 % interval of the normal distribution, in σ. */
export const Z_95 = 1.959963984540054;
/** χ² of two degrees of freedom that holds 95 %: −2·ln 0.05. */
export const CHI2_95_TWO = 5.991464547107982;
