import { Link } from "react-router-dom";
import { paths } from "./paths.ts";
import { Header } from "./shell.tsx";

export function NotFoundPage() {
  return (
    <>
      <Header />
      <main className="mx-auto max-w-xl p-10">
        <h1 className="mb-2 text-2xl font-semibold">There is nothing at this address</h1>
        <p className="mb-6 text-pencil">The build may have been deleted, or it is not yours to see.</p>
        <Link to={paths.builds} className="underline">To your builds</Link>
      </main>
    </>
  );
}
