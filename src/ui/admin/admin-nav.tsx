"use client";

import Link from "next/link";
import { usePathname } from "next/navigation";

const PAGES = [
  { href: "/admin/people", label: "People" },
  { href: "/admin/settings", label: "Settings" },
  { href: "/admin/mail", label: "Kept mail" },
  { href: "/admin/audit", label: "Audit trail" },
] as const;

export function AdminNav() {
  const pathname = usePathname();
  return (
    <nav aria-label="Administration" className="border-b border-rule bg-paper px-4 sm:px-6">
      <ul className="flex flex-wrap gap-x-6">
        {PAGES.map(({ href, label }) => (
          <li key={href}>
            <Link
              href={href}
              aria-current={pathname === href ? "page" : undefined}
              className="inline-block border-b-2 border-transparent py-2 font-table hover:border-rule aria-[current=page]:border-pick aria-[current=page]:font-semibold"
            >
              {label}
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  );
}
