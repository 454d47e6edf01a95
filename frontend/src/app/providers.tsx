import CssBaseline from "@mui/material/CssBaseline";
import { ThemeProvider } from "@mui/material/styles";
import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import type { ReactNode } from "react";
import { ApiError } from "../lib/api";
import { SCHEME_STORAGE_KEY, theme } from "./theme";

/** A refusal stays a refusal: only an unreachable or failing server is asked again. */
const worthRetrying = (failures: number, error: unknown): boolean =>
  failures < 2 && (!(error instanceof ApiError) || error.status === 0 || error.status >= 502);

const queryClient = new QueryClient({
  defaultOptions: {
    queries: { retry: worthRetrying, staleTime: 10_000, refetchOnWindowFocus: true },
    mutations: { retry: false },
  },
});

export function Providers({ children }: { children: ReactNode }) {
  return (
    <ThemeProvider
      theme={theme}
      defaultMode="system"
      modeStorageKey={SCHEME_STORAGE_KEY}
      disableTransitionOnChange
    >
      <CssBaseline enableColorScheme={false} />
      <QueryClientProvider client={queryClient}>{children}</QueryClientProvider>
    </ThemeProvider>
  );
}
