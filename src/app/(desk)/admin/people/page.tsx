import type { Metadata } from "next";
import { pageContext } from "@/server/page";
import { listPeople } from "@/services/users/list-people";
import { InviteForm } from "@/ui/admin/invite-form";
import { PeopleTable } from "@/ui/admin/people-table";
import { PageHead } from "@/ui/shell/page-head";
import { changeRoleAction, disablePersonAction, enablePersonAction, invitePersonAction, resendMailAction } from "../actions";

export const metadata: Metadata = { title: "People" };

const ACTIONS = {
  invite: invitePersonAction,
  changeRole: changeRoleAction,
  disable: disablePersonAction,
  enable: enablePersonAction,
  resend: resendMailAction,
};

export default async function PeoplePage() {
  const people = await listPeople(await pageContext("user.manage"));
  return (
    <>
      <PageHead title="People" />
      <div className="flex flex-col gap-8 px-4 py-6 sm:px-6">
        <InviteForm invite={invitePersonAction} />
        <PeopleTable people={people} actions={ACTIONS} />
      </div>
    </>
  );
}
