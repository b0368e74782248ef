import type { Metadata, Viewport } from "next";
import type { ReactNode } from "react";
import { Providers } from "./providers";
import "./globals.css";

export const metadata: Metadata = {
  title: { default: "Tailmark", template: "%s · Tailmark" },
  description: "Which junctions, turning movements and hours to retime, from floating-car pings.",
  icons: { icon: "/mark.svg" },
};

export const viewport: Viewport = { width: "device-width", initialScale: 1, themeColor: "#F6F3EC" };

/** The policy names the scripts of each answer anew, so no page can be made ahead of its request. */
export const dynamic = "force-dynamic";

export default function RootLayout({ children }: { children: ReactNode }) {
  return (
    <html lang="en-GB">
      <body>
        <Providers>{children}</Providers>
      </body>
    </html>
  );
}
