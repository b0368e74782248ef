import type { Metadata } from "next";
import { pageContext } from "@/server/page";
import { listKeptMail } from "@/services/mail/list-kept-mail";
import { getSettings } from "@/services/settings/get-settings";
import { KeptMailList } from "@/ui/admin/kept-mail-list";
import { Empty } from "@/ui/primitives/states";
import { LOCALE } from "@/ui/shell/locale";
import { PageHead } from "@/ui/shell/page-head";

export const metadata: Metadata = { title: "Kept mail" };

export default async function KeptMailPage() {
  const ctx = await pageContext("mail.view");
  const [mails, { timeZone }] = await Promise.all([listKeptMail(ctx), getSettings(ctx)]);
  return (
    <>
      <PageHead title="Kept mail">
        {mails ? <p className="mt-1 text-ink-soft">No mail server is named, so mail is kept here instead of going out. Newest first.</p> : null}
      </PageHead>
      {mails === null ? (
        <Empty title="Mail goes out by the mail server.">
          <p>None is kept here.</p>
        </Empty>
      ) : mails.length === 0 ? (
        <Empty title="No mail yet.">
          <p>Invitations, password links and reports on uploads will stand here.</p>
        </Empty>
      ) : (
        <div className="px-4 py-6 sm:px-6">
          <KeptMailList mails={mails} locale={LOCALE} timeZone={timeZone} />
        </div>
      )}
    </>
  );
}
