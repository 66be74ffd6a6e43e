/** Written into every stored snapshot, so that an old record names the arithmetic that made it. */
export const engineVersion = '1.0.0'
