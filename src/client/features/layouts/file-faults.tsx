import { CallError } from "../../api/call-error.ts";
import { Button } from "../../ui/button.tsx";
import { Dialog } from "../../ui/dialog.tsx";

/** Why a file was not taken: each fault at its place. Nothing of it was stored. */
export function FileFaults({ error, file, onClose }: { error: Error; file: string; onClose: () => void }) {
  const fields = error instanceof CallError ? error.fields : [];
  return (
    <Dialog title="The file was not taken" onClose={onClose} wide>
      <p className="mb-1"><span className="num">{file}</span></p>
      <p className="mb-4 text-pencil">{error.message} Nothing of it was stored.</p>
      {fields.length > 0 && (
        <div className="max-h-[50dvh] overflow-auto">
          <table className="w-full text-left">
            <thead><tr className="border-b border-ink text-sm text-pencil"><th className="py-1 pr-6 font-normal">place in the file</th><th className="font-normal">what is wrong there</th></tr></thead>
            <tbody>{fields.map((fault, i) => <tr key={i} className="border-b border-hair align-top"><td className="num py-1 pr-6 text-sm">{fault.path || "the whole"}</td><td className="py-1">{fault.message}</td></tr>)}</tbody>
          </table>
        </div>
      )}
      <div className="mt-5 flex justify-end"><Button onClick={onClose}>Close</Button></div>
    </Dialog>
  );
}
