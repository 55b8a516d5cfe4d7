/**
 * Method and path (Express's way of writing them) of every endpoint. All of a contract that a browser needs while it runs: what is sent and answered are
 * types there, so that the schemas stay with the server.
 */
export const ADDRESSES = {
  getMe: ["GET", "/api/me"],
  signIn: ["POST", "/api/sign-in"],
  signInDemo: ["POST", "/api/sign-in/demo"],
  signOut: ["POST", "/api/sign-out"],
  setPreferences: ["PATCH", "/api/me"],
  listBuilds: ["GET", "/api/builds"],
  createBuild: ["POST", "/api/builds"],
  getBuild: ["GET", "/api/builds/:buildId"],
  renameBuild: ["PATCH", "/api/builds/:buildId"],
  deleteBuild: ["DELETE", "/api/builds/:buildId"],
  listMembers: ["GET", "/api/builds/:buildId/members"],
  listLayouts: ["GET", "/api/builds/:buildId/layouts"],
  createLayout: ["POST", "/api/builds/:buildId/layouts"],
  importLayout: ["POST", "/api/builds/:buildId/layouts/import"],
  getLayout: ["GET", "/api/builds/:buildId/layouts/:layoutId"],
  exportLayout: ["GET", "/api/builds/:buildId/layouts/:layoutId/file"],
  duplicateLayout: ["POST", "/api/builds/:buildId/layouts/:layoutId/duplicate"],
  archiveLayout: ["POST", "/api/builds/:buildId/layouts/:layoutId/archive"],
  postCommand: ["POST", "/api/builds/:buildId/layouts/:layoutId/commands"],
  listChanges: ["GET", "/api/builds/:buildId/layouts/:layoutId/changes"],
  getReport: ["GET", "/api/builds/:buildId/layouts/:layoutId/report"],
  getSheet: ["GET", "/api/builds/:buildId/layouts/:layoutId/sheet.pdf"],
  getLayoutSchema: ["GET", "/api/layout.schema.json"],
} as const;

export type EndpointName = keyof typeof ADDRESSES;

/** Name, method and path of an endpoint. */
export const at = <Name extends EndpointName>(name: Name) => ({ name, method: ADDRESSES[name][0], path: ADDRESSES[name][1] });
