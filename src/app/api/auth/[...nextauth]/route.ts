import NextAuth from "next-auth";
import type { NextRequest } from "next/server";
import { authOptions } from "@/server/auth";

type Segment = { params: Promise<{ nextauth: string[] }> };

const handle = (request: NextRequest, segment: Segment) => NextAuth(request, segment, authOptions());

export { handle as GET, handle as POST };
