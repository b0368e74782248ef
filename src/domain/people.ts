import { z } from "zod";
import { ROLES, type Role } from "./actor";

export const PASSWORD_MIN = 10;

const Email = z.string().trim().toLowerCase().max(254).pipe(z.email({ message: "Give a full e-mail address." }));
const PersonName = z.string().trim().min(1, { message: "Give a name." }).max(80);
/** Long enough to resist guessing; the upper limit keeps hashing cheap. */
const NewPassword = z.string().min(PASSWORD_MIN, { message: `Use at least ${PASSWORD_MIN} characters.` }).max(200);

export const SignIn = z.object({ email: Email, password: z.string().min(1).max(200) });
export type SignIn = z.infer<typeof SignIn>;

export const AskForReset = z.object({ email: Email });
export type AskForReset = z.infer<typeof AskForReset>;

export const SetPassword = z
  .object({ token: z.string().min(20).max(200), password: NewPassword, repeated: z.string() })
  .refine((form) => form.password === form.repeated, { path: ["repeated"], message: "The two passwords differ." });
export type SetPassword = z.infer<typeof SetPassword>;

export const InvitePerson = z.object({ email: Email, name: PersonName, role: z.enum(ROLES) });
export type InvitePerson = z.infer<typeof InvitePerson>;

export const ChangeRole = z.object({ userId: z.uuid(), role: z.enum(ROLES) });
export type ChangeRole = z.infer<typeof ChangeRole>;

export const PersonRef = z.object({ userId: z.uuid() });
export type PersonRef = z.infer<typeof PersonRef>;

export const PERSON_STATES = ["active", "invited", "disabled"] as const;
export type PersonState = (typeof PERSON_STATES)[number];

export interface PersonView {
  userId: string;
  email: string;
  name: string;
  role: Role;
  state: PersonState;
  /** Role and access of oneself cannot be taken away by oneself. */
  isSelf: boolean;
}

export interface AuditView {
  id: number;
  at: string;
  actor: string;
  action: string;
  subject: string;
  detail: Record<string, unknown>;
}

export interface KeptMailView {
  id: string;
  receivedAt: string;
  to: string;
  subject: string;
  text: string;
}
