import type { Handler } from "../handler";
import { sendPasswordMailHandler } from "./send-password-mail";

export const handlers: readonly Handler[] = [sendPasswordMailHandler];
