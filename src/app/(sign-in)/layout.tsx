import type { ReactNode } from "react";
import { Mark } from "@/ui/shell/mark";
import { QueueDrawing } from "@/ui/sign-in/queue-drawing";

export default function SignInLayout({ children }: { children: ReactNode }) {
  return (
    <div className="grid min-h-dvh bg-sheet lg:grid-cols-[minmax(24rem,32rem)_1fr]">
      <main className="flex flex-col gap-8 px-6 py-8 sm:px-10 lg:border-r lg:border-ink">
        <p className="flex items-center gap-2 font-table text-[1.6rem] font-semibold leading-none">
          <Mark size={30} />
          Tailmark
        </p>
        <div className="flex w-full max-w-md flex-1 flex-col justify-center gap-6 pb-16">{children}</div>
      </main>
      <div className="hidden bg-paper lg:block">
        <QueueDrawing />
      </div>
    </div>
  );
}
