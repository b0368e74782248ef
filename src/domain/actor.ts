export const ROLES = ["engineer", "technician", "reader", "admin"] as const;
export type Role = (typeof ROLES)[number];

/** Who does a thing: a person, or the worker on behalf of one. */
export type Actor =
  | { type: "user"; userId: string; name: string; email: string; role: Role }
  | { type: "job"; job: string }
  | { type: "nobody" };

/** Everything that can be refused. One row of the matrix for each; services ask, pages and tests read. */
export const PERMISSIONS = {
  "screen.view": ["engineer", "admin"],
  "screen.export": ["engineer", "admin"],
  "junction.view": ["engineer", "technician", "admin"],
  "strip.view": ["engineer", "technician", "admin"],
  "strip.export": ["engineer", "admin"],
  "upload.create": ["engineer"],
  "upload.view": ["engineer", "admin"],
  "feed.manage": ["engineer", "admin"],
  "coverage.view": ["engineer", "admin"],
  "method.view": ["engineer", "technician", "admin"],
  "leg.view": ["engineer", "admin"],
  "leg.edit": ["engineer"],
  "hotspots.view": ["engineer", "technician", "reader", "admin"],
  "hotspots.publish": ["engineer"],
  "user.manage": ["admin"],
  "setting.manage": ["admin"],
  "audit.view": ["admin"],
  "mail.view": ["admin"],
} as const satisfies Record<string, readonly Role[]>;
export type Permission = keyof typeof PERMISSIONS;

/** The worker may do everything that its verbs ask for; nobody may do nothing. */
export function can(actor: Actor, permission: Permission): boolean {
  if (actor.type === "job") return true;
  if (actor.type === "nobody") return false;
  return (PERMISSIONS[permission] as readonly Role[]).includes(actor.role);
}

/** Where each role starts after sign-in. */
export const HOME_OF_ROLE: Record<Role, string> = {
  engineer: "/screen",
  technician: "/junctions",
  reader: "/hotspots",
  admin: "/admin/people",
};
