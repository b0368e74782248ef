import { can, type Actor, type Permission } from "@/domain/actor";

export interface Place {
  href: string;
  label: string;
  permission: Permission;
}

const PLACES: readonly Place[] = [
  { href: "/screen", label: "Screen", permission: "screen.view" },
  { href: "/junctions", label: "Junctions", permission: "junction.view" },
  { href: "/data", label: "Data", permission: "upload.view" },
  { href: "/hotspots", label: "Hotspots", permission: "hotspots.view" },
  { href: "/methods", label: "Methods", permission: "method.view" },
  { href: "/admin/people", label: "Admin", permission: "user.manage" },
];

/** The places that the actor may open, in the order of the header. */
export function placesFor(actor: Actor): Place[] {
  return PLACES.filter((place) => can(actor, place.permission));
}

/** A leg strip belongs to its junction, an admin page to the first of them. */
export function isCurrentPlace(place: Pick<Place, "href">, pathname: string): boolean {
  const section = `/${place.href.split("/")[1]}`;
  const here = `/${pathname.split("/")[1]}`;
  return here === section || (here === "/legs" && section === "/junctions");
}
