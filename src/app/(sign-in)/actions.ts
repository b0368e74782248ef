"use server";

import type { AskForReset } from "@/domain/people";
import { action } from "@/server/action";
import { clientAddress } from "@/server/client-address";
import { askForReset } from "@/services/auth/ask-for-reset";
import { setPassword } from "@/services/auth/set-password";
import type { Context } from "@/services/context";

export const askForResetAction = action(async (ctx: Context, input: AskForReset) => askForReset(ctx, { ...input, address: await clientAddress() }));

export const setPasswordAction = action(setPassword);
