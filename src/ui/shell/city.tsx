"use client";

import { createContext, useContext, type ReactNode } from "react";
import { can, type Permission, type Role } from "@/domain/actor";
import type { CitySettings } from "@/domain/settings";

/** What every page of a session reads in the same way: the city's settings and the person's role. */
export interface City {
  settings: CitySettings;
  locale: string;
  role: Role;
}

const CityContext = createContext<City | null>(null);

export function CityProvider({ city, children }: { city: City; children: ReactNode }) {
  return <CityContext value={city}>{children}</CityContext>;
}

export function useCity(): City {
  const city = useContext(CityContext);
  if (!city) throw new Error("useCity stands outside the pages of a signed-in person.");
  return city;
}

/** For showing or hiding what the server would refuse anyway. */
export function useCan(permission: Permission): boolean {
  const { role } = useCity();
  return can({ type: "user", userId: "", name: "", email: "", role }, permission);
}
