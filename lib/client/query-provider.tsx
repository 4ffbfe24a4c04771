"use client";

import { isServer, QueryClient, QueryClientProvider } from "@tanstack/react-query";
import type { ReactNode } from "react";

let inBrowser: QueryClient | undefined;

/** One client for the browser; a fresh one for each render on the server, so that nobody's data meets another's. */
function queryClient(): QueryClient {
  if (isServer) return new QueryClient();
  inBrowser ??= new QueryClient({ defaultOptions: { queries: { retry: 2, refetchOnWindowFocus: true } } });
  return inBrowser;
}

/** Around what reads live data. */
export function QueryProvider({ children }: { children: ReactNode }) {
  return <QueryClientProvider client={queryClient()}>{children}</QueryClientProvider>;
}
