import type { ReactNode } from "react";
import { pageContext } from "@/server/page";

/** Asks before the loading state is sent: after it the answer could no longer be a 403. */
export default async function LegsLayout({ children }: { children: ReactNode }) {
  await pageContext("leg.view");
  return children;
}
