import { Client } from "pg";
import type { TestProject } from "vitest/node";
import { buildWhenChanged } from "../../db/bring-up/build.mjs";
import { startThrowAwayCluster } from "../../db/bring-up/cluster.mjs";
import { makeReady } from "../../db/bring-up/make-ready.mjs";

declare module "vitest" {
  interface ProvidedContext {
    /** A database in the run's own cluster, from which others are made. */
    clusterUrl: string;
  }
}

type Cluster = Awaited<ReturnType<typeof startThrowAwayCluster>>;
const run = globalThis as { bondwrightTestCluster?: { cluster: Promise<Cluster>; users: number } };

/**
 * One throw-away cluster for a run, shared by the projects that want one, with two templates in it: `migrated`,
 * with empty tables, and `seeded`, with the demo.
 */
export default async function setup(project: TestProject) {
  run.bondwrightTestCluster ??= { cluster: prepareCluster(), users: 0 };
  const shared = run.bondwrightTestCluster;
  shared.users += 1;
  const { url, stop } = await shared.cluster;
  project.provide("clusterUrl", url);
  return () => {
    shared.users -= 1;
    if (shared.users === 0) stop();
  };
}

async function prepareCluster(): Promise<Cluster> {
  buildWhenChanged(["db"]);
  const cluster = await startThrowAwayCluster();
  const admin = new Client(cluster.url);
  await admin.connect();
  await admin.query("CREATE DATABASE migrated");
  makeReady(cluster.url.replace(/[^/]*$/, "migrated"), { demo: false });
  await admin.query("CREATE DATABASE seeded TEMPLATE migrated");
  makeReady(cluster.url.replace(/[^/]*$/, "seeded"), { demo: true });
  await admin.end();
  return cluster;
}
