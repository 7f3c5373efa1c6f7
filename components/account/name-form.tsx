"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useRouter } from "next/navigation";
import { useForm } from "react-hook-form";
import { useRenameAccount } from "@/components/account/use-account";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import { accountChange } from "@/lib/contracts/account";
import type { AccountChange } from "@/lib/contracts/account";

/** Changes the name that stands beside what the owner publishes. */
export function NameForm({ name }: { readonly name: string }) {
  const router = useRouter();
  const toast = useToast();
  const rename = useRenameAccount();
  const form = useForm<AccountChange>({ resolver: zodResolver(accountChange), defaultValues: { name } });
  const save = (change: AccountChange) =>
    rename.mutate(change, {
      onSuccess: () => {
        toast({ text: "Name changed." });
        router.refresh();
      },
    });
  return (
    <form noValidate onSubmit={(event) => void form.handleSubmit(save)(event)} className="flex max-w-96 flex-col gap-4">
      <TextField
        label="Name"
        hint="Shown beside what you publish."
        autoComplete="name"
        error={form.formState.errors.name === undefined ? undefined : "Give a name of up to 80 characters."}
        {...form.register("name")}
      />
      {rename.error === null ? null : <ProblemMessage error={rename.error} />}
      <Button type="submit" className="self-start" disabled={rename.isPending}>
        Change name
      </Button>
    </form>
  );
}
