import type { Metadata } from "next";
import { ForgotForm } from "@/ui/sign-in/forgot-form";
import { askForResetAction } from "../actions";

export const metadata: Metadata = { title: "New password" };

export default function ForgotPage() {
  return (
    <>
      <h1 className="text-3xl">Ask for a new password</h1>
      <ForgotForm ask={askForResetAction} />
    </>
  );
}
