import { CellError } from "../errors";

/** Runs `make`; an error that does not say in which field of the block it arose is given `field`. */
export function inField<T>(field: string, make: () => T): T {
  try {
    return make();
  } catch (error) {
    if (!(error instanceof CellError) || error.place.field !== undefined) throw error;
    throw new CellError(error.code, error.message, { ...error.place, field });
  }
}
