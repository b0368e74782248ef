import type { Metadata } from "next";
import { pageContext } from "@/server/page";
import { getSettings } from "@/services/settings/get-settings";
import { SettingsForm } from "@/ui/admin/settings-form";
import { PageHead } from "@/ui/shell/page-head";
import { saveSettingsAction } from "../actions";

export const metadata: Metadata = { title: "Settings" };

export default async function SettingsPage() {
  const settings = await getSettings(await pageContext("setting.manage"));
  return (
    <>
      <PageHead title="Settings" />
      <div className="px-4 py-6 sm:px-6">
        <SettingsForm settings={settings} timeZones={Intl.supportedValuesOf("timeZone")} save={saveSettingsAction} />
      </div>
    </>
  );
}
