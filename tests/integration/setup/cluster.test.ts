import { chmodSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Client } from "pg";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { startCluster } from "@/docker-less-setup/postgres.mjs";

const passwords = { admin: "adminadmin", owner: "ownerowner", app: "appappapp" };
let parent = "";
let running: Awaited<ReturnType<typeof startCluster>> | undefined;

/** Made once without waiting for the disk; each test starts it as the product does. */
async function start(durable = true) {
  const folder = join(parent, "pg");
  running = await startCluster({ folder, logFile: join(parent, "server.log"), passwords, durable });
  return running;
}

async function stop() {
  await running?.stop();
  running = undefined;
}

beforeAll(async () => {
  parent = mkdtempSync(join(tmpdir(), "twinpass-cluster-"));
  chmodSync(parent, 0o711);
  await start(false);
  await stop();
});
afterEach(stop);
afterAll(() => rmSync(parent, { recursive: true, force: true }));

describe("the private cluster", () => {
  it("keeps its port and what was written over a restart", async () => {
    const first = await start();
    first.sql("create table public.kept (a int); insert into public.kept values (7);");
    await stop();
    const second = await start();
    expect(second.port).toBe(first.port);
    expect(second.sql("select a from public.kept;")).toBe("7");
  });

  it("takes over a server that survived an unclean end", async () => {
    const first = await start();
    const pid = first.sql("select pg_postmaster_start_time();");
    const second = await start();
    expect(second.port).toBe(first.port);
    expect(second.sql("select pg_postmaster_start_time();")).toBe(pid);
  });

  it("asks for a password and listens on this machine only", async () => {
    const cluster = await start();
    const wrong = new Client({ connectionString: cluster.url("app").replace(passwords.app, "wrong") });
    // 28P01 is invalid_password in the table of PostgreSQL's error codes (appendix A of its manual).
    await expect(wrong.connect()).rejects.toMatchObject({ code: "28P01" });
    expect(cluster.sql("show listen_addresses;")).toBe("127.0.0.1");
    expect(cluster.sql("show unix_socket_directories;")).toBe("");
    const methods = "select distinct auth_method from pg_hba_file_rules;";
    expect(cluster.sql(methods)).toBe("scram-sha-256");
  });

  it("keeps the runtime role from owning and making anything", async () => {
    const cluster = await start();
    const may =
      "select rolsuper or rolcreatedb or rolcreaterole or rolreplication or rolbypassrls from pg_roles";
    expect(cluster.sql(`${may} where rolname = 'twinpass_app';`)).toBe("f");
    expect(() => cluster.sql("create table public.mine (a int);", "twinpass", "app")).toThrow(
      /permission denied/,
    );
  });

  const off = ["fsync", "full_page_writes", "synchronous_commit"];
  const changes = [
    {
      change: off.map((name) => `alter system set ${name} = off;`),
      undo: "alter system reset all;",
      named: "fsync, synchronous_commit, full_page_writes",
    },
    {
      change: ["alter role twinpass_app set synchronous_commit = local;"],
      undo: "alter role twinpass_app reset all;",
      named: "synchronous_commit",
    },
    {
      change: ["alter database twinpass set synchronous_commit = off;"],
      undo: "alter database twinpass reset all;",
      named: "synchronous_commit",
    },
  ];
  for (const { change, undo, named } of changes) {
    it(`does not start after: ${change.join(" ")}`, async () => {
      (await start(false)).sql(change.join("\n"));
      await stop();
      await expect(start()).rejects.toThrow(
        `has ${named} switched off, so what Twinpass acknowledges could be lost`,
      );
      (await start(false)).sql(undo);
      await stop();
      await start();
    });
  }
});
