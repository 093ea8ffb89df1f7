/** Version of the program, as in package.json; a test holds them together. */
export const serviceVersion = 'fluence-ledger 0.1.0';
/** Changes when the same request on the same data may give other numbers. */
export const modelVersion = '2026-12-01';
