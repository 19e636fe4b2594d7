/** Bounds on what one expression may ask for. People stay far below them; attacks do not. */
export const MAX_CHARACTERS = 4000;
/** Levels of brackets, signs, powers, choices and calls inside one another, and of lines that use lines. */
export const MAX_DEPTH = 64;
/** Nodes of the calculation, shared parts counted once. */
export const MAX_NODES = 4000;
/** Nodes once the partial derivatives are added. */
export const MAX_DERIVED_NODES = 60_000;
