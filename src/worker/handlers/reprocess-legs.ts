import { reprocessLegs as job } from "@/jobs/definitions/reprocess-legs";
import { reprocessLegs } from "@/services/ingest/reprocess-legs";
import { handler } from "../handler";

export const reprocessLegsHandler = handler(job, reprocessLegs);
