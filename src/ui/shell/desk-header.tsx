"use client";

import Link from "next/link";
import { usePathname } from "next/navigation";
import { Mark } from "./mark";
import { isCurrentPlace, type Place } from "./navigation";
import { PersonMenu, type Person } from "./person-menu";

export function DeskHeader({ places, person, cityName, home }: { places: Pick<Place, "href" | "label">[]; person: Person; cityName: string; home: string }) {
  const pathname = usePathname();
  return (
    <header className="border-b border-ink bg-paper print:hidden">
      <a href="#content" className="sr-only focus:not-sr-only focus:absolute focus:left-3 focus:top-2 focus:z-40 focus:border focus:border-ink focus:bg-sheet focus:px-3 focus:py-1.5">
        Skip to the content
      </a>
      <div className="flex flex-wrap items-center gap-x-6 px-4 pt-1 sm:min-h-[3.25rem] sm:flex-nowrap sm:px-6 sm:pt-0">
        <Link href={home} className="flex items-center gap-2 py-2 font-table text-[1.4rem] font-semibold leading-none">
          <Mark />
          Tailmark
        </Link>
        <nav aria-label="Main" className="order-last w-full sm:order-none sm:w-auto sm:flex-1">
          <ul className="flex flex-wrap gap-x-5 font-table text-[1.02rem] font-medium">
            {places.map((place) => (
              <li key={place.href}>
                <Link
                  href={place.href}
                  aria-current={isCurrentPlace(place, pathname) ? "page" : undefined}
                  className="inline-block border-b-[3px] border-transparent pb-1 pt-1.5 hover:border-rule aria-[current=page]:border-tail"
                >
                  {place.label}
                </Link>
              </li>
            ))}
          </ul>
        </nav>
        <div className="ml-auto">
          <PersonMenu person={person} cityName={cityName} />
        </div>
      </div>
    </header>
  );
}
