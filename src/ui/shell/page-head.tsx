import type { ReactNode } from "react";

/** Head of a page: where one is (crumbs), what it is (title), what is shown (the sentence). */
export function PageHead({ title, above, children }: { title: ReactNode; above?: ReactNode; children?: ReactNode }) {
  return (
    <div className="border-b border-rule bg-paper px-4 py-4 sm:px-6">
      {above ? <p className="text-[0.95rem] text-ink-soft">{above}</p> : null}
      <h1 className="text-2xl sm:text-[1.7rem]">{title}</h1>
      {children}
    </div>
  );
}
