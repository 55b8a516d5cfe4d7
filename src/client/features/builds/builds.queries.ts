import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { call } from "../../api/call.ts";

export const useBuilds = () => useQuery({ queryKey: ["builds"], queryFn: () => call("listBuilds") });

/** Begins, renames and deletes builds; every list of them is fetched again after. */
export function useBuildChanges() {
  const client = useQueryClient();
  const onSuccess = async () => {
    await Promise.all([client.invalidateQueries({ queryKey: ["builds"] }), client.invalidateQueries({ queryKey: ["build"] })]);
  };
  return {
    create: useMutation({ mutationFn: (name: string) => call("createBuild", { body: { name } }), onSuccess }),
    rename: useMutation({ mutationFn: ({ buildId, name }: { buildId: string; name: string }) => call("renameBuild", { params: { buildId }, body: { name } }), onSuccess }),
    remove: useMutation({ mutationFn: (buildId: string) => call("deleteBuild", { params: { buildId } }), onSuccess }),
  };
}
