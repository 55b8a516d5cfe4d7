import type { TestProject } from "vitest/node";
import { buildServer } from "../../server/setup/build.js";
import { removeCluster, removeDeadClusters, startCluster } from "../../server/setup/cluster.js";
import { makeTemplate } from "./template.ts";

declare module "vitest" {
  interface ProvidedContext {
    /** Where the run's own cluster is reached as its owner. */
    clusterUrl: string;
  }
}

/**
 * One PostgreSQL cluster for the whole run (a directory of its own, nothing synced, removed after), with one migrated and seeded database that every test file
 * clones. Runs before the first test that needs the service; tests of core alone never start it.
 */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  buildServer();
  await removeDeadClusters();
  const name = `test-${process.pid}`;
  const cluster = await startCluster({ name, durable: false });
  await makeTemplate(cluster.ownerUrl);
  project.provide("clusterUrl", cluster.ownerUrl);
  return async () => {
    await removeCluster(name);
  };
}
