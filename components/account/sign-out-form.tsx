"use client";

import { signOut } from "next-auth/react";
import { useState } from "react";
import { Button } from "@/components/ui/button";

export function SignOutForm() {
  const [isBusy, setBusy] = useState(false);
  return (
    <div className="mt-6 max-w-[22rem]">
      <Button
        busy={isBusy && "Signing out"}
        kind="main"
        onClick={() => {
          setBusy(true);
          void signOut({ callbackUrl: "/" });
        }}
        wide
      >
        Sign out
      </Button>
    </div>
  );
}
