import * as contract from "#contracts/builds.contract.ts";
import type { Db } from "../../database/connection.ts";
import { notFound } from "../../http/fault.ts";
import { mount, type Mounted } from "../../http/mount.ts";
import * as builds from "./builds.repository.ts";

export function mountBuilds(mounted: Mounted, db: Db): void {
  const found = async (personId: string, buildId: string) => {
    const build = await builds.findBuild(db, personId, buildId);
    if (!build) throw notFound("build");
    return build;
  };
  mount(mounted, contract.listBuilds, async ({ personId }) => ({ builds: await builds.listBuilds(db, personId) }));
  mount(mounted, contract.createBuild, async ({ personId, body, write }) => {
    const id = await write((tx) => builds.insertBuild(tx, body.name, personId));
    return found(personId, id);
  });
  mount(mounted, contract.getBuild, ({ personId, params }) => found(personId, params.buildId));
  mount(mounted, contract.renameBuild, async ({ personId, params, body, write }) => {
    await write((tx) => builds.updateBuildName(tx, params.buildId, body.name));
    return found(personId, params.buildId);
  });
  mount(mounted, contract.deleteBuild, async ({ params, write }) => {
    await write((tx) => builds.deleteBuild(tx, params.buildId));
    return { deleted: true as const };
  });
  mount(mounted, contract.listMembers, async ({ params }) => ({ members: await builds.listMembers(db, params.buildId) }));
}
