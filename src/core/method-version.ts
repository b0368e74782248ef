/** Raised whenever a change of arithmetic moves a stored figure; kept with every score. */
export const METHOD_VERSION = 3;
