import Link from "next/link";
import type { ButtonHTMLAttributes, ReactNode, Ref } from "react";
import { classNames } from "./class-names";

const BASE =
  "inline-flex min-h-9 items-center justify-center gap-2 border px-3.5 py-1.5 font-table text-[0.95rem] font-medium leading-tight disabled:opacity-60";

const TONES = {
  strong: "border-ink bg-ink text-sheet hover:bg-[#2A3757]",
  plain: "border-ink-soft/60 bg-sheet text-ink hover:border-ink",
  quiet: "border-transparent bg-transparent text-ink hover:border-rule",
} as const;
export type ButtonTone = keyof typeof TONES;

export interface ButtonProps extends ButtonHTMLAttributes<HTMLButtonElement> {
  tone?: ButtonTone;
  ref?: Ref<HTMLButtonElement>;
}

export function Button({ tone = "plain", className, type = "button", ...rest }: ButtonProps) {
  return <button type={type} className={classNames(BASE, TONES[tone], className)} {...rest} />;
}

/** A link in the dress of a button; `download` makes a plain anchor, since files do not go through the router. */
export function ButtonLink(props: { href: string; tone?: ButtonTone; download?: boolean; className?: string; children: ReactNode }) {
  const className = classNames(BASE, TONES[props.tone ?? "plain"], props.className);
  if (props.download) {
    return (
      <a href={props.href} download className={className}>
        {props.children}
      </a>
    );
  }
  return (
    <Link href={props.href} className={className}>
      {props.children}
    </Link>
  );
}
