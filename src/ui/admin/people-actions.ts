import type { ActionResult } from "@/domain/errors";
import type { ChangeRole, InvitePerson, PersonRef } from "@/domain/people";

type Act<I, O = void> = (input: I) => Promise<ActionResult<O>>;

export interface PeopleActions {
  invite: Act<InvitePerson, { userId: string }>;
  changeRole: Act<ChangeRole>;
  disable: Act<PersonRef>;
  enable: Act<PersonRef>;
  resend: Act<PersonRef>;
}
