import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import type { LengthUnit } from "#core/units/parse-length.ts";
import { call } from "../api/call.ts";

export const useMe = () => useQuery({ queryKey: ["me"], queryFn: () => call("getMe"), staleTime: 5 * 60_000 });

export function useSignIn() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (input: { email: string; password?: string }) => (input.password === undefined ? call("signInDemo", { body: { email: input.email } }) : call("signIn", { body: { email: input.email, password: input.password } })),
    onSuccess: async () => {
      client.removeQueries({ predicate: (query) => query.queryKey[0] !== "me" });
      await client.invalidateQueries({ queryKey: ["me"] });
    },
  });
}

export function useSignOut() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => call("signOut"),
    onSettled: async () => {
      client.removeQueries({ predicate: (query) => query.queryKey[0] !== "me" });
      await client.invalidateQueries({ queryKey: ["me"] });
    },
  });
}

export type Theme = "light" | "night" | "system";

/** Units and theme of the person; changes show at once and are kept with the account. */
export function usePreferences() {
  const client = useQueryClient();
  const me = useMe();
  const change = useMutation({
    mutationFn: (body: { units?: LengthUnit; theme?: Theme }) => call("setPreferences", { body }),
    onMutate: (body) => client.setQueryData<Awaited<ReturnType<typeof call<"getMe">>>>(["me"], (old) => (old?.person ? { ...old, person: { ...old.person, ...body } } : old)),
  });
  return { units: me.data?.person?.units ?? "mm", theme: me.data?.person?.theme ?? ("system" as Theme), change: change.mutate };
}
