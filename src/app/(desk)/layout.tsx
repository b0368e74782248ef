import type { ReactNode } from "react";
import { HOME_OF_ROLE } from "@/domain/actor";
import { signedInContext } from "@/server/page";
import { getSettings } from "@/services/settings/get-settings";
import { CityProvider } from "@/ui/shell/city";
import { DeskHeader } from "@/ui/shell/desk-header";
import { LOCALE } from "@/ui/shell/locale";
import { placesFor } from "@/ui/shell/navigation";

export default async function DeskLayout({ children }: { children: ReactNode }) {
  const ctx = await signedInContext();
  const { actor } = ctx;
  if (actor.type !== "user") return null;
  const settings = await getSettings(ctx);
  const places = placesFor(actor).map(({ href, label }) => ({ href, label }));
  const person = { name: actor.name, email: actor.email, role: actor.role };
  return (
    <CityProvider city={{ settings, locale: LOCALE, role: actor.role }}>
      <div className="flex min-h-dvh flex-col">
        <DeskHeader places={places} person={person} cityName={settings.cityName} home={HOME_OF_ROLE[actor.role]} />
        <main id="content" tabIndex={-1} className="flex flex-1 flex-col bg-sheet outline-none">
          {children}
        </main>
      </div>
    </CityProvider>
  );
}
