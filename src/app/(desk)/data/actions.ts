"use server";

import { action } from "@/server/action";
import { makeFeedToken, revokeFeedToken } from "@/services/feed/feed-tokens";

export const makeFeedTokenAction = action(makeFeedToken);
export const revokeFeedTokenAction = action(revokeFeedToken);
