import type { Metadata } from "next";
import { pageContext } from "@/server/page";
import { MethodsText } from "@/ui/methods/methods-text";
import { PageHead } from "@/ui/shell/page-head";

export const metadata: Metadata = { title: "Methods" };

export default async function MethodsPage() {
  await pageContext("method.view");
  return (
    <>
      <PageHead title="Methods">
        <p className="mt-1 max-w-prose text-ink-soft">How pings become the figures of the screen, with the published source of each method, and what the figures cannot say.</p>
      </PageHead>
      <MethodsText />
    </>
  );
}
