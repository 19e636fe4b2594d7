import NextAuth from "next-auth";
import type { NextRequest } from "next/server";
import { authOptions } from "@/app/_server/auth/options";
import { assertOwnOrigin } from "@/app/_server/origin";
import { problemResponse, Refusal, unforeseen } from "@/app/_server/problem";

interface Context {
  readonly params: Promise<{ nextauth: string[] }>;
}

async function handle(request: NextRequest, context: Context): Promise<Response> {
  try {
    if (request.method === "POST") assertOwnOrigin(request.headers);
    const answer: unknown = await NextAuth(request, context, authOptions());
    if (answer instanceof Response) return answer;
    throw new Error("next-auth gave no response");
  } catch (error) {
    return problemResponse(error instanceof Refusal ? error : unforeseen(error));
  }
}

export { handle as GET, handle as POST };
