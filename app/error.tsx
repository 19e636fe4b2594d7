"use client";

import { useEffect } from "react";
import { Button } from "@/app/_ui/Button";

/** What anybody sees when a screen could not be drawn. */
export default function ScreenError({ error, reset }: { readonly error: Error & { digest?: string }; readonly reset: () => void }) {
  useEffect(() => console.error(error), [error]);
  return (
    <main className="mx-auto max-w-[520px] px-4 pt-24">
      <h1 className="font-serif text-title-phone font-medium">This screen could not be drawn</h1>
      <p className="mt-3 text-second">
        Nothing you did is lost. Try again; if it happens again, tell whoever runs this server what you were doing
        {error.digest ? ` and this number: ${error.digest}` : ""}.
      </p>
      <p className="mt-8">
        <Button look="main" onClick={reset}>
          Try again
        </Button>
      </p>
    </main>
  );
}
