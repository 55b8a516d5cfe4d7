import { useEffect, useId, useRef, useState, type FormEvent, type ReactNode } from "react";
import { Button } from "./button.tsx";
import { TextField } from "./field.tsx";

/** A sheet laid on top: the browser's own dialog keeps the focus inside and gives it back; Escape closes it. */
export function Dialog({ title, onClose, children, wide = false }: { title: string; onClose: () => void; children: ReactNode; wide?: boolean }) {
  const element = useRef<HTMLDialogElement>(null);
  const id = useId();
  useEffect(() => {
    const dialog = element.current!;
    if (!dialog.open) dialog.showModal();
  }, []);
  return (
    <dialog
      ref={element}
      aria-labelledby={id}
      onCancel={(event) => {
        event.preventDefault();
        onClose();
      }}
      onMouseDown={(event) => event.target === element.current && onClose()}
      className={`m-auto max-h-[92dvh] w-[calc(100vw-24px)] border border-ink bg-lit p-0 backdrop:bg-ink/35 ${wide ? "max-w-[720px]" : "max-w-[480px]"}`}
    >
      <div className="px-6 py-5">
        <h2 id={id} className="mb-3 text-xl font-semibold">{title}</h2>
        {children}
      </div>
    </dialog>
  );
}

/** Asks before something that cannot be taken back; where `typed` is given, its exact words have to be typed. */
export function ConfirmDialog({ title, children, action, typed, busy = false, error, onConfirm, onClose }: {
  title: string; children: ReactNode; action: string; typed?: string; busy?: boolean; error?: string | undefined; onConfirm: () => void; onClose: () => void;
}) {
  const [text, setText] = useState("");
  const ready = typed === undefined || text.trim() === typed;
  const submit = (event: FormEvent) => {
    event.preventDefault();
    if (ready && !busy) onConfirm();
  };
  return (
    <Dialog title={title} onClose={onClose}>
      <form onSubmit={submit} className="space-y-4">
        <div className="text-pencil">{children}</div>
        {typed !== undefined && <TextField label={`Type "${typed}" to go on`} value={text} onChange={setText} autoComplete="off" />}
        {error && <p role="alert" className="text-short">{error}</p>}
        <div className="flex justify-end gap-3">
          <Button onClick={onClose}>Keep it</Button>
          <Button type="submit" look="danger" disabled={!ready || busy}>{action}</Button>
        </div>
      </form>
    </Dialog>
  );
}

/** Asks for a name. */
export function NameDialog({ title, label, start = "", action, busy = false, error, onGive, onClose }: {
  title: string; label: string; start?: string; action: string; busy?: boolean; error?: string | undefined; onGive: (name: string) => void; onClose: () => void;
}) {
  const [name, setName] = useState(start);
  return (
    <Dialog title={title} onClose={onClose}>
      <form
        className="space-y-5"
        onSubmit={(event) => {
          event.preventDefault();
          if (name.trim() && !busy) onGive(name.trim());
        }}
      >
        <TextField label={label} value={name} onChange={setName} error={error} autoFocus maxLength={120} autoComplete="off" />
        <div className="flex justify-end gap-3">
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" look="main" disabled={!name.trim() || busy}>{action}</Button>
        </div>
      </form>
    </Dialog>
  );
}
