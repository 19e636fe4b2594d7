/**
 * Seed of every random test: fixed, so that a failure comes again; `SEED=…` tries another. Printed once a file.
 */
export const seed = Number(process.env.SEED ?? 20_261_201);
console.log(`seed ${seed}`);
