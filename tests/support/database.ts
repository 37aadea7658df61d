import { randomUUID } from "node:crypto";
import { Client } from "pg";
import { inject } from "vitest";

/**
 * A fresh database of the run's own cluster, with all tables; with the demo in it when `seed` is asked for.
 * Returns its address and sets `DATABASE_URL` to it, so that code under test in this process uses it too.
 */
export async function testDatabase({ seed = false } = {}): Promise<string> {
  const cluster = inject("clusterUrl");
  const name = `test_${randomUUID().replaceAll("-", "")}`;
  const admin = new Client(cluster);
  await admin.connect();
  try {
    await admin.query(`CREATE DATABASE ${name} TEMPLATE ${seed ? "seeded" : "migrated"} STRATEGY file_copy`);
  } finally {
    await admin.end();
  }
  const url = cluster.replace(/[^/]*$/, name);
  process.env.DATABASE_URL = url;
  return url;
}
