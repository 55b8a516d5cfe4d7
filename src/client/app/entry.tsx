import "@fontsource/barlow-semi-condensed/latin-400.css";
import "@fontsource/barlow-semi-condensed/latin-600.css";
import "@fontsource/jetbrains-mono/latin-400.css";
import "@fontsource/jetbrains-mono/latin-600.css";
import "./theme.css";
import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { lazy, StrictMode, Suspense } from "react";
import { createRoot } from "react-dom/client";
import { createBrowserRouter, RouterProvider, useRouteError } from "react-router-dom";
import { Toaster } from "sonner";
import { CallError } from "../api/call.ts";
import { Trouble, Waiting } from "../ui/controls.tsx";
import { NotFoundPage } from "./not-found.tsx";
import { SignedIn } from "./shell.tsx";

const SignInPage = lazy(() => import("../features/sign-in/sign-in-page.tsx"));
const BuildsPage = lazy(() => import("../features/builds/builds-page.tsx"));
const LayoutsPage = lazy(() => import("../features/layouts/layouts-page.tsx"));
const BenchPage = lazy(() => import("../features/bench/bench-page.tsx"));
const SheetsPage = lazy(() => import("../features/sheets/sheets-page.tsx"));
const HistoryPage = lazy(() => import("../features/history/history-page.tsx"));
const MethodPage = lazy(() => import("../features/method/method-page.tsx"));

function Broken() {
  return <Trouble error={useRouteError()} retry={() => location.reload()} />;
}

const router = createBrowserRouter([
  { path: "/sign-in", element: <SignInPage />, errorElement: <Broken /> },
  {
    element: <SignedIn />, errorElement: <Broken />, children: [
      { path: "/", element: <BuildsPage /> },
      { path: "/builds/:buildId", element: <LayoutsPage /> },
      { path: "/builds/:buildId/layouts/:layoutId", element: <BenchPage /> },
      { path: "/builds/:buildId/layouts/:layoutId/sheets", element: <SheetsPage /> },
      { path: "/builds/:buildId/layouts/:layoutId/history", element: <HistoryPage /> },
      { path: "/method", element: <MethodPage /> },
      { path: "*", element: <NotFoundPage /> },
    ],
  },
]);

const client = new QueryClient({
  defaultOptions: { queries: { staleTime: 10_000, retry: (count, error) => error instanceof CallError && (error.code === "offline" || error.code === "busy" || error.code === "away") && count < 3 } },
});

createRoot(document.getElementById("root")!).render(
  <StrictMode>
    <QueryClientProvider client={client}>
      <Suspense fallback={<Waiting what="the page" />}><RouterProvider router={router} /></Suspense>
      <Toaster position="bottom-center" toastOptions={{ style: { borderRadius: 0, border: "1px solid var(--ink)", background: "var(--lit)", color: "var(--ink)", fontFamily: "inherit" } }} />
    </QueryClientProvider>
  </StrictMode>,
);
