import { useState } from "react";
import { useBench, useDocument } from "../editor/bench-context.tsx";
import { ChoiceDialog } from "./choice-dialog.tsx";

/** Where the work stands, in words: with the server, on its way, kept in this browser, or waiting for somebody to decide. */
export function SaveMark() {
  const { store, role } = useBench();
  const { saveState, savedAt, waiting, seq, trouble, kept, away } = useDocument((state) => state);
  const [choosing, setChoosing] = useState(false);
  const edits = `${waiting.length} ${waiting.length === 1 ? "edit" : "edits"}`;
  if (trouble) {
    return (
      <>
        <button type="button" className="min-h-8 border border-short px-2 font-semibold text-short hover:bg-short hover:text-film" onClick={() => setChoosing(true)}>{trouble.kind === "conflict" ? "two versions: choose" : "an edit was refused"}</button>
        {choosing && <ChoiceDialog trouble={trouble} onClose={() => setChoosing(false)} />}
      </>
    );
  }
  if (saveState === "waiting" || (away && waiting.length > 0)) {
    return (
      <span role="status" className="flex items-baseline gap-2 text-tight" title={away ?? undefined}>
        <span>{kept ? `${edits} kept here` : `${edits} not kept: leave this page open`}<span className="max-xl:hidden">, {away?.includes("sign-in") ? "sign-in has ended" : "server away"}</span></span>
        <button type="button" className="border-b border-dotted border-current" onClick={() => store.sendNow()}>try now</button>
      </span>
    );
  }
  const time = savedAt?.toLocaleTimeString([], { hour: "2-digit", minute: "2-digit" });
  return (
    <span role="status" className="whitespace-nowrap text-pencil max-md:sr-only">
      {saveState === "saving" ? "saving …" : role === "viewer" ? "" : time ? `saved ${time}` : "saved"}
      <span className="max-xl:hidden">{saveState === "saving" || role === "viewer" ? "" : " · "}change {seq}</span>
      {away && waiting.length === 0 && <span className="text-tight" title={away}> · server away</span>}
    </span>
  );
}
