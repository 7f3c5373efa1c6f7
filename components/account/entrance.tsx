import type { ReactNode } from "react";
import { AccountAside } from "@/components/account/account-aside";

/** The page of a form that leads to an account: form left, what it is for right. */
export function Entrance({
  title,
  form,
  instead,
}: {
  readonly title: string;
  readonly form: ReactNode;
  readonly instead: ReactNode;
}) {
  return (
    <div className="gutter grid flex-1 grid-cols-1 content-center gap-10 py-10 md:px-16 lg:grid-cols-[minmax(0,400px)_minmax(0,1fr)] lg:gap-14">
      <section>
        <h1 className="mb-6 text-4xl tracking-[-0.02em]">{title}</h1>
        {form}
        <p className="mt-6 text-muted">{instead}</p>
      </section>
      <AccountAside />
    </div>
  );
}
