"use client";

import { CSPProvider } from "@base-ui/react/csp-provider";
import { createContext, type ReactNode, useContext, useState } from "react";
import { Toaster } from "./toaster";

const NonceContext = createContext<string | undefined>(undefined);

/** The nonce of this response, for what writes a style element of its own. */
export function useNonce(): string | undefined {
  return useContext(NonceContext);
}

interface UiProviderProps {
  /** From the request's header, read in the root layout. */
  nonce?: string | undefined;
  children: ReactNode;
}

/** Once, in the root layout, round everything. */
export function UiProvider({ nonce: given, children }: UiProviderProps) {
  // The policy is that of the document: a refresh brings a newer nonce, which it would refuse.
  const [nonce] = useState(given);
  return (
    <CSPProvider disableStyleElements={nonce === undefined} nonce={nonce}>
      <NonceContext value={nonce}>
        {children}
        <Toaster />
      </NonceContext>
    </CSPProvider>
  );
}
