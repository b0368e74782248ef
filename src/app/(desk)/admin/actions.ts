"use server";

import { action } from "@/server/action";
import { saveSettings } from "@/services/settings/save-settings";
import { changeRole } from "@/services/users/change-role";
import { invitePerson } from "@/services/users/invite-person";
import { resendMail } from "@/services/users/resend-mail";
import { disablePerson, enablePerson } from "@/services/users/set-access";

export const invitePersonAction = action(invitePerson);
export const changeRoleAction = action(changeRole);
export const disablePersonAction = action(disablePerson);
export const enablePersonAction = action(enablePerson);
export const resendMailAction = action(resendMail);
export const saveSettingsAction = action(saveSettings);
