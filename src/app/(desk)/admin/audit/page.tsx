import type { Metadata } from "next";
import { pageContext } from "@/server/page";
import { AUDIT_PAGE, listAudit } from "@/services/audit/list-audit";
import { getSettings } from "@/services/settings/get-settings";
import { AuditTable } from "@/ui/admin/audit-table";
import { ButtonLink } from "@/ui/primitives/button";
import { Empty } from "@/ui/primitives/states";
import { LOCALE } from "@/ui/shell/locale";
import { PageHead } from "@/ui/shell/page-head";

export const metadata: Metadata = { title: "Audit trail" };

export default async function AuditPage({ searchParams }: { searchParams: Promise<{ before?: string | string[] }> }) {
  const before = [(await searchParams).before].flat()[0];
  const ctx = await pageContext("audit.view");
  const [events, { timeZone }] = await Promise.all([listAudit(ctx, { before }), getSettings(ctx)]);
  return (
    <>
      <PageHead title="Audit trail" />
      {events.length === 0 ? (
        <Empty title={before ? "Nothing older is recorded." : "Nothing has been done yet."} />
      ) : (
        <div className="flex flex-col items-start gap-5 px-4 py-6 sm:px-6">
          <div className="w-full">
            <AuditTable events={events} locale={LOCALE} timeZone={timeZone} />
          </div>
          <div className="flex gap-3">
            {before ? <ButtonLink href="/admin/audit">Newest</ButtonLink> : null}
            {events.length === AUDIT_PAGE ? <ButtonLink href={`/admin/audit?before=${events[events.length - 1].id}`}>Older</ButtonLink> : null}
          </div>
        </div>
      )}
    </>
  );
}
