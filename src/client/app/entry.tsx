import "./theme.css";
import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { lazy, StrictMode, Suspense } from "react";
import { createRoot } from "react-dom/client";
import { BrowserRouter, Route, Routes, useLocation } from "react-router-dom";
import { CallError } from "../api/call-error.ts";
import { NotFound, Unbroken } from "./not-found.tsx";
import { PageLoading, SignedIn } from "./signed-in.tsx";
import { patterns } from "./paths.ts";

const SignInPage = lazy(() => import("../features/sign-in/sign-in-page.tsx"));
const BuildsPage = lazy(() => import("../features/builds/builds-page.tsx"));
const LayoutsPage = lazy(() => import("../features/layouts/layouts-page.tsx"));
const LayoutDesk = lazy(() => import("./layout-desk.tsx"));
const BenchPage = lazy(() => import("../features/bench/bench-page.tsx"));
const SheetsPage = lazy(() => import("../features/sheets/sheets-page.tsx"));
const HistoryPage = lazy(() => import("../features/history/history-page.tsx"));
const MethodPage = lazy(() => import("../features/method/method-page.tsx"));
const Toaster = lazy(() => import("sonner").then((module) => ({ default: module.Toaster })));

/** One document store serves every page of a layout: going from the bench to the sheets keeps what waits and what can be undone. */
function Pages() {
  const { pathname } = useLocation();
  return (
    <Unbroken place={pathname}>
      <Routes>
        <Route path="/sign-in" element={<SignInPage />} />
        <Route element={<SignedIn />}>
          <Route path="/" element={<BuildsPage />} />
          <Route path={patterns.build} element={<LayoutsPage />} />
          <Route path={patterns.layout} element={<LayoutDesk />}>
            <Route index element={<BenchPage />} />
            <Route path="sheets" element={<SheetsPage />} />
            <Route path="history" element={<HistoryPage />} />
            <Route path="*" element={<NotFound />} />
          </Route>
          <Route path="/method" element={<MethodPage />} />
          <Route path="*" element={<NotFound />} />
        </Route>
      </Routes>
    </Unbroken>
  );
}

/** Tried again by itself only where the same request may well be answered in a moment. */
const passes = (error: Error) => error instanceof CallError && (error.code === "offline" || error.code === "busy" || error.code === "away");
const client = new QueryClient({ defaultOptions: { queries: { staleTime: 10_000, retry: (count, error) => passes(error) && count < 3 }, mutations: { retry: false } } });

createRoot(document.getElementById("root")!).render(
  <StrictMode>
    <QueryClientProvider client={client}>
      <Suspense fallback={<PageLoading />}>
        <BrowserRouter><Pages /></BrowserRouter>
      </Suspense>
      <Suspense>
        <Toaster position="bottom-center" toastOptions={{ actionButtonStyle: { borderRadius: 0, height: 30, padding: "0 12px", background: "var(--ink)", color: "var(--film)", fontSize: 15, fontWeight: 600 }, style: { borderRadius: 0, border: "1px solid var(--ink)", background: "var(--lit)", color: "var(--ink)", fontFamily: "var(--font-sans)", fontSize: 16, boxShadow: "none" } }} />
      </Suspense>
    </QueryClientProvider>
  </StrictMode>,
);
