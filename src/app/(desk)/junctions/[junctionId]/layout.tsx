import type { ReactNode } from "react";
import { forPage, pageContext } from "@/server/page";
import { requireJunction } from "@/services/catalogue/require-known";

interface Props {
  children: ReactNode;
  params: Promise<{ junctionId: string }>;
}

/** Asks before the loading state is sent: after it the answer could no longer be a 404. */
export default async function OneJunctionLayout({ children, params }: Props) {
  await forPage(requireJunction(await pageContext("junction.view"), await params));
  return children;
}
