import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { createServer } from "node:net";
import { join } from "node:path";
import pg from "pg";
import { afterAll, describe, expect, it } from "vitest";
import { removeCluster, startCluster } from "../../../server/setup/cluster.js";

// this process's own number: the run's cluster is named after its parent's
const name = `test-${process.pid}`;
// as it is for keeps: one that syncs nothing may lose what was just written when it is killed
const start = () => startCluster({ name });
afterAll(() => removeCluster(name));

const query = async (url: string, text: string) => {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    return (await client.query(text)).rows;
  } finally {
    await client.end();
  }
};
const pidOf = (folder: string) => Number(readFileSync(join(folder, "data/postmaster.pid"), "utf8").split("\n")[0]);
const isGone = async (pid: number) => {
  for (let i = 0; i < 100 && existsSync(`/proc/${pid}`); i++) await new Promise((resolve) => setTimeout(resolve, 50));
};

describe("the project's own cluster", () => {
  it("is made on first use, listens on loopback only, takes no one without the password, and is found again running", async () => {
    const first = await start();
    await query(first.ownerUrl, "create table kept (n int)");
    await query(first.ownerUrl, "insert into kept values (7)");
    expect((await query(first.ownerUrl, "show listen_addresses"))[0]).toEqual({ listen_addresses: "127.0.0.1" });
    const wrong = new URL(first.ownerUrl);
    wrong.password = "guess";
    await expect(query(wrong.toString(), "select 1")).rejects.toThrow(/password authentication failed/);
    const pid = pidOf(first.folder);
    const again = await start();
    expect([again.port, pidOf(again.folder)]).toEqual([first.port, pid]);
  });

  it("keeps its data through a kill -9, a pid file that was left behind, and one that names somebody else's process", async () => {
    const before = await start();
    const pid = pidOf(before.folder);
    process.kill(pid, "SIGKILL");
    await isGone(pid);
    expect(existsSync(join(before.folder, "data/postmaster.pid"))).toBe(true);
    const after = await start();
    expect(await query(after.ownerUrl, "select n from kept")).toEqual([{ n: 7 }]);
    after.stop();
    writeFileSync(join(after.folder, "data/postmaster.pid"), `${process.pid}\n${join(after.folder, "data")}\n0\n${after.port}\n\n127.0.0.1\n0 0\nready\n`);
    const third = await start();
    expect(await query(third.ownerUrl, "select n from kept")).toEqual([{ n: 7 }]);
  }, 60_000);

  it("takes another port where its own was taken meanwhile", async () => {
    const before = await start();
    before.stop();
    const squatter = createServer().listen(before.port, "127.0.0.1");
    await new Promise((resolve) => squatter.once("listening", resolve));
    const after = await start();
    expect(after.port).not.toBe(before.port);
    expect(await query(after.ownerUrl, "select n from kept")).toEqual([{ n: 7 }]);
    await new Promise((resolve) => squatter.close(resolve));
  }, 60_000);

  it("made by another version of PostgreSQL is refused with both remedies, and left as it is", async () => {
    const { folder, stop } = await start();
    stop();
    const place = join(folder, "data/PG_VERSION");
    const version = readFileSync(place, "utf8");
    writeFileSync(place, "9\n");
    await expect(start()).rejects.toThrow(/made by PostgreSQL 9; this machine has \d+\. Either install postgresql-9 .* remove /);
    writeFileSync(place, version);
    const after = await start();
    expect(await query(after.ownerUrl, "select n from kept")).toEqual([{ n: 7 }]);
  }, 60_000);

  it("that was interrupted while it was made is made anew", async () => {
    const { folder, stop } = await start();
    stop();
    rmSync(join(folder, "data"), { recursive: true });
    mkdirSync(join(folder, "making"));
    writeFileSync(join(folder, "making/PG_VERSION"), "15\n");
    const after = await start();
    expect(await query(after.ownerUrl, "select 1 as one")).toEqual([{ one: 1 }]);
  }, 60_000);
});
