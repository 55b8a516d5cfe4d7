import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import type { LayoutSummary } from "#contracts/layouts.contract.ts";
import { call, CallError } from "../../api/call.ts";

export const LARGEST_FILE = 20 * 1024 * 1024;

export const useBuild = (buildId: string) => useQuery({ queryKey: ["build", buildId], queryFn: () => call("getBuild", { params: { buildId } }) });
export const useMembers = (buildId: string) => useQuery({ queryKey: ["members", buildId], queryFn: () => call("listMembers", { params: { buildId } }) });
export const useLayouts = (buildId: string, archived: boolean) =>
  useQuery({ queryKey: ["layouts", buildId, archived], queryFn: () => call("listLayouts", { params: { buildId }, query: { archived: archived ? "yes" : "no" } }) });

/** What an owner does with whole layouts. */
export function useLayoutChanges(buildId: string) {
  const client = useQueryClient();
  const onSuccess = async () => {
    await Promise.all([client.invalidateQueries({ queryKey: ["layouts", buildId] }), client.invalidateQueries({ queryKey: ["builds"] })]);
  };
  const params = (one: LayoutSummary) => ({ buildId, layoutId: one.id });
  return {
    create: useMutation({ mutationFn: (name: string) => call("createLayout", { params: { buildId }, body: { name } }), onSuccess }),
    duplicate: useMutation({ mutationFn: ({ like, name }: { like: LayoutSummary; name: string }) => call("duplicateLayout", { params: params(like), body: { name } }), onSuccess }),
    archive: useMutation({ mutationFn: (one: LayoutSummary) => call("archiveLayout", { params: params(one), body: { archived: !one.archived } }), onSuccess }),
    rename: useMutation({
      mutationFn: async ({ one, name }: { one: LayoutSummary; name: string }) => {
        const { document, seq } = await call("getLayout", { params: params(one) });
        const value = { name, notes: document.notes, ...(document.extra ? { extra: document.extra } : {}) };
        return call("postCommand", { params: params(one), body: { commandId: crypto.randomUUID(), base: seq, command: { kind: "set", which: "document", value }, label: `Layout renamed to ${name}` } });
      },
      onSuccess,
    }),
    bringIn: useMutation({
      mutationFn: async (file: File) => {
        if (file.size > LARGEST_FILE) throw new CallError("too-large", `A layout file is at most 20 MB; this one has ${(file.size / 1024 / 1024).toFixed(1)} MB.`);
        return call("importLayout", { params: { buildId }, text: await file.text() });
      },
      onSuccess,
    }),
  };
}
