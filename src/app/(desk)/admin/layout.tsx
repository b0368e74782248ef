import type { ReactNode } from "react";
import { pageContext } from "@/server/page";
import { AdminNav } from "@/ui/admin/admin-nav";

export default async function AdminLayout({ children }: { children: ReactNode }) {
  await pageContext("user.manage");
  return (
    <>
      <AdminNav />
      {children}
    </>
  );
}
