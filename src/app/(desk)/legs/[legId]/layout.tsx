import type { ReactNode } from "react";
import { forPage, pageContext } from "@/server/page";
import { requireLeg } from "@/services/catalogue/require-known";

interface Props {
  children: ReactNode;
  params: Promise<{ legId: string }>;
}

/** Asks before the loading state is sent: after it the answer could no longer be a 404. */
export default async function OneLegLayout({ children, params }: Props) {
  await forPage(requireLeg(await pageContext("strip.view"), await params));
  return children;
}
