import type { Metadata } from "next";
import Link from "next/link";
import { currentContext } from "@/server/current-context";
import { tokenPurpose } from "@/services/auth/set-password";
import { SetPasswordForm } from "@/ui/sign-in/set-password-form";
import { setPasswordAction } from "../actions";

export const metadata: Metadata = { title: "Set password", referrer: "no-referrer" };

export default async function SetPasswordPage({ searchParams }: { searchParams: Promise<{ token?: string | string[] }> }) {
  const token = [(await searchParams).token].flat()[0] ?? "";
  const purpose = await tokenPurpose(await currentContext(), token);
  if (purpose === null) {
    return (
      <>
        <h1 className="text-3xl">This link no longer works</h1>
        <p>It has been used, or its time has run out.</p>
        <Link href="/forgot" className="text-link self-start">
          Ask for a new one
        </Link>
      </>
    );
  }
  return (
    <>
      <h1 className="text-3xl">{purpose === "invitation" ? "Choose a password to begin" : "Choose a new password"}</h1>
      <SetPasswordForm token={token} set={setPasswordAction} />
    </>
  );
}
