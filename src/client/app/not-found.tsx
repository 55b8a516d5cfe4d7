import { Component, type ReactNode } from "react";
import { Button, ButtonLink } from "../ui/button.tsx";
import { HandbreadthMark } from "../ui/mark.tsx";
import { Header } from "./header.tsx";
import { paths } from "./paths.ts";
import { useTitle } from "./theme.ts";

/** Said of what does not exist and of what is not the person's to see alike. */
export function NotFound({ what = "page" }: { what?: string }) {
  useTitle("Not here");
  return (
    <>
      <Header />
      <main id="main" className="mx-auto max-w-2xl px-6 py-16">
        <p className="num text-pencil">404</p>
        <h1 className="mb-3 text-3xl font-semibold">There is no such {what}</h1>
        <p className="mb-8 text-pencil">It may have been deleted, its address may be mistyped, or it is not yours to see: whoever owns the build can tell you, and can invite you to it.</p>
        <ButtonLink to={paths.builds} look="main">To your builds</ButtonLink>
      </main>
    </>
  );
}

/** Shows a page that broke as broken, with the ways on; going elsewhere (another `place`) tries again. */
export class Unbroken extends Component<{ readonly place: string; readonly children: ReactNode }, { readonly error: unknown; readonly place: string }> {
  override state = { error: null as unknown, place: this.props.place };
  static getDerivedStateFromError = (error: unknown) => ({ error });
  static getDerivedStateFromProps = (props: { readonly place: string }, state: { readonly place: string }) => (props.place === state.place ? null : { error: null, place: props.place });
  override render() {
    return this.state.error === null ? this.props.children : <BrokenPage error={this.state.error} />;
  }
}

/** What is shown where a page broke: nothing that waits to be sent is lost by it. */
function BrokenPage({ error }: { error: unknown }) {
  const stale = error instanceof Error && /dynamically imported module|Failed to fetch|Importing a module/i.test(error.message);
  return (
    <main className="mx-auto max-w-2xl px-6 py-16">
      <HandbreadthMark size={36} />
      <h1 className="mb-3 mt-6 text-3xl font-semibold">{stale ? "A piece of this page could not be fetched" : "This page broke"}</h1>
      <p className="mb-2 text-pencil">{stale ? "The server is away, or a newer version has taken the place of this one." : "That is our mistake. What you typed is kept in this browser and is sent when the page is open again."}</p>
      {!stale && <p className="num mb-6 border border-hair px-3 py-2 text-sm">{error instanceof Error ? error.message : String(error)}</p>}
      <div className="flex gap-3"><Button look="main" onClick={() => location.reload()}>Load it again</Button><Button onClick={() => location.assign(paths.builds)}>To your builds</Button></div>
    </main>
  );
}
