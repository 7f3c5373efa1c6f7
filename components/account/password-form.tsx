"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { useChangePassword } from "@/components/account/use-account";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { showFieldErrors } from "@/components/ui/form-errors";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import { passwordChange } from "@/lib/contracts/account";
import type { PasswordChange } from "@/lib/contracts/account";

/** Changes the password; every other browser is signed out with it. */
export function PasswordForm() {
  const toast = useToast();
  const change = useChangePassword();
  const form = useForm<PasswordChange>({
    resolver: zodResolver(passwordChange),
    defaultValues: { current: "", next: "" },
  });
  const { errors } = form.formState;
  const save = (given: PasswordChange) =>
    change.mutate(given, {
      onSuccess: ({ revoked }) => {
        form.reset();
        const others =
          revoked === 0 ? "" : ` ${formatCount(revoked, "other browser was", "other browsers were")} signed out.`;
        toast({ text: `Password changed.${others}` });
      },
      onError: (error) => showFieldErrors<PasswordChange>(error, ["current", "next"], form.setError),
    });
  const isPlaced = errors.current !== undefined || errors.next !== undefined;
  return (
    <form noValidate onSubmit={(event) => void form.handleSubmit(save)(event)} className="flex max-w-96 flex-col gap-4">
      <TextField
        label="Password now"
        type="password"
        autoComplete="current-password"
        error={
          errors.current === undefined
            ? undefined
            : errors.current.type === "too_small"
              ? "Type the password you have now."
              : errors.current.message
        }
        {...form.register("current")}
      />
      <TextField
        label="New password"
        type="password"
        hint="At least 10 characters. Every other browser is signed out."
        autoComplete="new-password"
        error={errors.next === undefined ? undefined : "A password has 10 to 200 characters."}
        {...form.register("next")}
      />
      {change.error === null || isPlaced ? null : <ProblemMessage error={change.error} />}
      <Button type="submit" className="self-start" disabled={change.isPending}>
        Change password
      </Button>
    </form>
  );
}
