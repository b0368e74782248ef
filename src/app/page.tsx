import { redirect } from "next/navigation";
import { HOME_OF_ROLE } from "@/domain/actor";
import { signedInContext } from "@/server/page";

/** Everyone starts where their work is. */
export default async function StartPage() {
  const { actor } = await signedInContext();
  redirect(HOME_OF_ROLE[actor.role]);
}
