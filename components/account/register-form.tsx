"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useForm } from "react-hook-form";
import { callApi } from "@/components/ui/api";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { showFieldErrors } from "@/components/ui/form-errors";
import { ProblemMessage } from "@/components/ui/problem-message";
import { accountView, registration, registrationTaken } from "@/lib/contracts/account";
import type { Registration } from "@/lib/contracts/account";

/** Registers, then signs in with what was typed. An address that has an account gets the same answer, and its own password decides. */
async function register(given: Registration): Promise<boolean> {
  await callApi("/api/account", { method: "POST", body: given, shape: registrationTaken });
  const { email, password } = given;
  return callApi("/api/sessions", { method: "POST", body: { email, password }, shape: accountView }).then(
    () => true,
    () => false,
  );
}

/** Makes an account. */
export function RegisterForm({ returnPath }: { readonly returnPath: string }) {
  const router = useRouter();
  const form = useForm<Registration>({
    resolver: zodResolver(registration),
    defaultValues: { name: "", email: "", password: "" },
  });
  const { errors } = form.formState;
  const make = useMutation({
    mutationFn: register,
    onSuccess: (isIn) => {
      router.push(isIn ? returnPath : `/sign-in?from=${encodeURIComponent(returnPath)}`);
      router.refresh();
    },
    onError: (error) => showFieldErrors<Registration>(error, ["name", "email", "password"], form.setError),
  });
  return (
    <form
      noValidate
      method="post"
      onSubmit={(event) => void form.handleSubmit((given) => make.mutate(given))(event)}
      className="flex flex-col gap-4"
    >
      <TextField
        label="Name"
        hint="Shown beside what you publish."
        autoComplete="name"
        error={errors.name === undefined ? undefined : "Give a name of up to 80 characters."}
        {...form.register("name")}
      />
      <TextField
        label="E-mail address"
        type="email"
        autoComplete="username"
        error={errors.email === undefined ? undefined : "This is no e-mail address."}
        {...form.register("email")}
      />
      <TextField
        label="Password"
        type="password"
        hint="At least 10 characters."
        autoComplete="new-password"
        error={errors.password === undefined ? undefined : "A password has 10 to 200 characters."}
        {...form.register("password")}
      />
      {make.error === null ? null : <ProblemMessage error={make.error} />}
      <Button type="submit" kind="primary" size="large" disabled={make.isPending} className="self-start">
        Register
      </Button>
    </form>
  );
}
