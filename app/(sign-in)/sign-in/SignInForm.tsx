"use client";

import { signIn } from "next-auth/react";
import { useState, type FormEvent } from "react";
import { Button } from "@/app/_ui/Button";
import { TextField } from "@/app/_ui/TextField";

export interface SignInFormProps {
  /** Path to go to once signed in. */
  readonly to: string;
  readonly email?: string;
  readonly orcid: boolean;
}

/** E-mail and password, sent through next-auth. */
export function SignInForm({ to, email = "", orcid }: SignInFormProps) {
  const [problem, setProblem] = useState<string | null>(null);
  const [pending, setPending] = useState(false);

  async function send(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    setPending(true);
    setProblem(null);
    try {
      const answer = await signIn("credentials", { email: String(form.get("email")), password: String(form.get("password")), redirect: false });
      if (answer?.ok && !answer.error) return window.location.assign(to);
      setProblem(sentence(answer?.error));
    } catch {
      setProblem("The server did not answer. Wait a moment and try again.");
    }
    setPending(false);
  }

  return (
    <form onSubmit={(event) => void send(event)} className="grid gap-4">
      <TextField label="E-mail" name="email" type="email" autoComplete="username" required defaultValue={email} autoFocus={email === ""} />
      <TextField label="Password" name="password" type="password" autoComplete="current-password" required autoFocus={email !== ""} />
      {problem ? (
        <p role="alert" className="text-vermilion">
          {problem}
        </p>
      ) : null}
      <div className="flex items-baseline gap-6">
        <Button type="submit" look="main" disabled={pending}>
          Sign in
        </Button>
        {orcid ? (
          <Button onClick={() => void signIn("orcid", { callbackUrl: to })} disabled={pending}>
            Sign in with ORCID
          </Button>
        ) : null}
      </div>
    </form>
  );
}

function sentence(error: string | null | undefined): string {
  if (!error || error === "CredentialsSignin") return "No account has this e-mail and password. Check both, or sign up.";
  return error;
}
