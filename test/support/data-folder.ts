import { fileURLToPath } from 'node:url';

/** The reference data of the tree. */
export const dataFolder = fileURLToPath(new URL('../../data', import.meta.url));
