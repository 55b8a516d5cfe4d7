/** Every page's address, once. */
export const paths = {
  signIn: "/sign-in",
  builds: "/",
  build: (buildId: string) => `/builds/${buildId}`,
  bench: (buildId: string, layoutId: string) => `/builds/${buildId}/layouts/${layoutId}`,
  sheets: (buildId: string, layoutId: string) => `/builds/${buildId}/layouts/${layoutId}/sheets`,
  history: (buildId: string, layoutId: string) => `/builds/${buildId}/layouts/${layoutId}/history`,
  method: "/method",
} as const;

/** The same as patterns for the router. */
export const patterns = {
  build: "/builds/:buildId",
  layout: "/builds/:buildId/layouts/:layoutId",
} as const;
