import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { currentContext } from "@/server/current-context";
import { localPath } from "@/ui/sign-in/local-path";
import { SignInForm } from "@/ui/sign-in/sign-in-form";

export const metadata: Metadata = { title: "Sign in" };

export default async function SignInPage({ searchParams }: { searchParams: Promise<{ next?: string | string[] }> }) {
  const { next } = await searchParams;
  const target = localPath([next].flat()[0]);
  const { actor } = await currentContext();
  if (actor.type === "user") redirect(target);
  return (
    <>
      <div className="flex flex-col gap-2">
        <h1 className="text-3xl">Sign in</h1>
        <p className="text-ink-soft">Which junctions, turning movements and hours to retime, from floating-car pings.</p>
      </div>
      <SignInForm next={target} />
    </>
  );
}
