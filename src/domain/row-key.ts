import { z } from "zod";

const MAX_KEY = 2 ** 31 - 1;

/** Key of a junction or leg, also as text of an address; larger ones cannot exist, as the column ends there. */
export const RowKey = z.coerce.number().int().positive().max(MAX_KEY);
