import { Suspense } from "react";
import { Navigate, Outlet, useLocation } from "react-router-dom";
import { Loading, TroubleNote } from "../ui/states.tsx";
import { HandbreadthMark } from "../ui/mark.tsx";
import { paths } from "./paths.ts";
import { useMe } from "./session.queries.ts";
import { useTheme } from "./theme.ts";

/** Pages for people who are signed in: others are sent to the sign-in and come back. */
export function SignedIn() {
  const me = useMe();
  const location = useLocation();
  useTheme();
  if (me.isPending) return <PageLoading />;
  if (me.isError) return <div className="mx-auto max-w-xl p-8"><TroubleNote error={me.error} again={() => void me.refetch()} title="The server does not answer" /></div>;
  if (!me.data.person) return <Navigate to={paths.signIn} replace state={{ from: location.pathname + location.search }} />;
  return <Suspense fallback={<PageLoading />}><Outlet /></Suspense>;
}

/** The header's place and lines to be written on: nothing jumps when the page comes. */
export function PageLoading() {
  return (
    <div className="flex h-full flex-col">
      <div className="flex min-h-[47px] items-center border-b border-ink px-4"><HandbreadthMark size={25} /></div>
      <div className="mx-auto w-full max-w-5xl px-6 py-10"><Loading what="Fetching the page" lines={8} /></div>
    </div>
  );
}
