import type { Metadata } from "next";
import Link from "next/link";
import { redirect } from "next/navigation";
import { Entrance } from "@/components/account/entrance";
import { SignInForm } from "@/components/account/sign-in-form";
import { safeReturnPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Sign in" };

export default async function SignInPage({
  searchParams,
}: {
  readonly searchParams: Promise<{ from?: string | string[] }>;
}) {
  const { from } = await searchParams;
  const returnPath = safeReturnPath(typeof from === "string" ? from : null);
  if ((await getSessionUser()) !== null) redirect(returnPath);
  return (
    <Entrance
      title="Sign in"
      form={<SignInForm returnPath={returnPath} />}
      instead={
        <>
          No account yet?{" "}
          <Link href={`/register?from=${encodeURIComponent(returnPath)}`} className="link text-text">
            Register
          </Link>
        </>
      }
    />
  );
}
