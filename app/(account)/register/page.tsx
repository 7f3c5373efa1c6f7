import type { Metadata } from "next";
import Link from "next/link";
import { redirect } from "next/navigation";
import { Entrance } from "@/components/account/entrance";
import { RegisterForm } from "@/components/account/register-form";
import { safeReturnPath, signInPath } from "@/components/shell/navigation";
import { getSessionUser } from "@/lib/server/session";

export const metadata: Metadata = { title: "Register" };

export default async function RegisterPage({
  searchParams,
}: {
  readonly searchParams: Promise<{ from?: string | string[] }>;
}) {
  const { from } = await searchParams;
  const returnPath = safeReturnPath(typeof from === "string" ? from : null);
  if ((await getSessionUser()) !== null) redirect(returnPath);
  return (
    <Entrance
      title="Register"
      form={<RegisterForm returnPath={returnPath} />}
      instead={
        <>
          You have an account?{" "}
          <Link href={signInPath(returnPath)} className="link text-text">
            Sign in
          </Link>
        </>
      }
    />
  );
}
