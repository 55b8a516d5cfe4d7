import type { Server } from "node:http";
import type { AddressInfo } from "node:net";
import { buildClient } from "../../server/setup/build.js";
import { startTestServer, type TestServer, type TestServerOptions } from "./database.ts";

export interface Service extends TestServer {
  /** Where a browser or a raw socket reaches it: http://127.0.0.1:PORT. */
  readonly url: string;
  readonly port: number;
  readonly listener: Server;
}

/** A test server that listens on loopback. With `site`, the built client is served too (built first where sources are newer): what journeys open. */
export async function startService({ site = false, ...options }: TestServerOptions & { site?: boolean } = {}): Promise<Service> {
  if (site) buildClient();
  const server = await startTestServer({ ...options, ...(site ? { client: new URL("../../dist/client", import.meta.url).pathname } : {}) });
  const listener = server.app.listen(0, "127.0.0.1");
  await new Promise<void>((resolve, reject) => listener.once("listening", resolve).once("error", reject));
  const { port } = listener.address() as AddressInfo;
  return {
    ...server, port, listener, url: `http://127.0.0.1:${port}`,
    close: async () => {
      listener.closeAllConnections();
      await new Promise<void>((resolve) => listener.close(() => resolve()));
      await server.close();
    },
  };
}
