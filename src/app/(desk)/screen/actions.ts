"use server";

import { action } from "@/server/action";
import { publishReport } from "@/services/reports/publish-report";

export const publishReportAction = action(publishReport);
