/** British English words; numbers and dates follow it on server and browser alike. */
export const LOCALE = "en-GB";
