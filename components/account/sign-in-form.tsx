"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useForm } from "react-hook-form";
import { callApi, ApiProblem } from "@/components/ui/api";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { ProblemMessage } from "@/components/ui/problem-message";
import { accountView, signIn } from "@/lib/contracts/account";
import type { SignIn } from "@/lib/contracts/account";

/** Signs in and goes where the reader came from. */
export function SignInForm({ returnPath }: { readonly returnPath: string }) {
  const router = useRouter();
  const client = useQueryClient();
  const form = useForm<SignIn>({ resolver: zodResolver(signIn), defaultValues: { email: "", password: "" } });
  const { errors } = form.formState;
  const enter = useMutation({
    mutationFn: (given: SignIn) => callApi("/api/sessions", { method: "POST", body: given, shape: accountView }),
    onSuccess: () => {
      client.clear();
      router.push(returnPath);
      router.refresh();
    },
  });
  const isWrong = enter.error instanceof ApiProblem && enter.error.problem.status === 401;
  return (
    <form
      noValidate
      method="post"
      onSubmit={(event) => void form.handleSubmit((given) => enter.mutate(given))(event)}
      className="flex flex-col gap-4"
    >
      <TextField
        label="E-mail address"
        type="email"
        autoComplete="username"
        error={errors.email?.message}
        {...form.register("email")}
      />
      <TextField
        label="Password"
        type="password"
        autoComplete="current-password"
        error={
          isWrong ? "Address or password is wrong." : errors.password === undefined ? undefined : "Type your password."
        }
        {...form.register("password")}
      />
      {enter.error === null || isWrong ? null : <ProblemMessage error={enter.error} />}
      <Button type="submit" kind="primary" size="large" disabled={enter.isPending} className="self-start">
        Sign in
      </Button>
    </form>
  );
}
