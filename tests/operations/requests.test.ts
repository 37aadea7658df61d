import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Client } from "pg";
import { afterAll, beforeAll, describe, expect, test, vi } from "vitest";
import { Commit, JournalEntry, Session } from "../../db/models/index.ts";
import { testDatabase } from "../support/database.ts";
import { newTeam, password } from "./people.ts";
import { newRouter, origin, Visitor } from "./router.ts";

// The faults that these tests bring about would fill the screen.
vi.hoisted(() => {
  process.env.LOG_LEVEL = "silent";
});

const built = vi.hoisted(() => ({ assetsBuildDirectory: "" }));
vi.mock("virtual:react-router/server-build", () => built);

let ask: Awaited<ReturnType<typeof newRouter>>;

beforeAll(async () => {
  await testDatabase();
  ask = await newRouter();
  built.assetsBuildDirectory = mkdtempSync(join(tmpdir(), "bondwright-"));
  mkdirSync(join(built.assetsBuildDirectory, "assets"));
  writeFileSync(join(built.assetsBuildDirectory, "assets", "core.worker-1a2b.js"), "postMessage(1)");
  writeFileSync(join(built.assetsBuildDirectory, "assets", ".hidden.js"), "secret");
  writeFileSync(join(built.assetsBuildDirectory, "secret.js"), "secret");
});

afterAll(() => rmSync(built.assetsBuildDirectory, { recursive: true }));

describe("every response", () => {
  test.each(["/", "/sign-in", "/health", "/no/such/page", "/w/none.js", "/sets/a/b", "/sign-in.data"])(
    "to %s carries the security headers",
    async (path) => {
      const { headers } = await new Visitor(ask).get(path);
      expect(headers.get("Content-Security-Policy")).toMatch(
        /script-src 'self' 'nonce-[\w+/=]{20,}'; .*frame-ancestors 'none'/,
      );
      expect(headers.get("X-Content-Type-Options")).toBe("nosniff");
      expect(headers.get("Referrer-Policy")).toBe("same-origin");
      expect(headers.get("X-Request-Id")).toMatch(/^[0-9a-f-]{36}$/);
    },
  );

  test("has a nonce of its own", async () => {
    const policies = [await new Visitor(ask).get("/health"), await new Visitor(ask).get("/health")];
    expect(new Set(policies.map(({ headers }) => headers.get("Content-Security-Policy"))).size).toBe(2);
  });

  test("away from plain loopback sets a __Host- cookie that is Secure", async () => {
    const { modeller } = await newTeam("modeller");
    const body = new URLSearchParams({ email: modeller.email, password }).toString();
    for (const site of ["https://models.example", "http://models.example", "https://localhost"]) {
      const headers = {
        Origin: site,
        "Content-Length": `${body.length}`,
        "Content-Type": "application/x-www-form-urlencoded",
      };
      const response = await ask(new Request(`${site}/sign-in`, { method: "POST", body, headers }));
      expect(response.headers.get("Set-Cookie")).toMatch(
        /^__Host-bondwright=[^;]+; Max-Age=\d+; Path=\/; HttpOnly; Secure; SameSite=Lax$/,
      );
    }
  });
});

describe("a request that changes something", () => {
  test.each([
    ["another site", { Origin: "https://evil.example" }],
    ["another port", { Origin: "http://127.0.0.1:4001" }],
    ["a page that hides its origin", { Origin: "null" }],
    ["another site, without Origin", { "Sec-Fetch-Site": "cross-site" }],
    ["a sister site, without Origin", { "Sec-Fetch-Site": "same-site" }],
  ] as [string, HeadersInit][])("from %s is refused on every route", async (_, headers) => {
    const { modeller, address } = await newTeam("modeller");
    const visitor = new Visitor(ask);
    await visitor.signIn(modeller.email, password);
    const save = JSON.stringify({ parent: null, files: [{ path: "a.wright", text: "x" }], message: "x" });
    const edit = `/sets/${address.team}/${address.set}/edit/a.wright`;
    const commits = await Commit.count();
    // React Router's own check of documents answers some of them before ours does, with 400.
    for (const path of [edit, `${edit}.data`, "/sign-out", "/sign-in", "/health", "/nowhere"])
      expect((await visitor.post(path, save, headers)).status, path).toBeOneOf([400, 403]);
    expect(await Commit.count()).toBe(commits);
    expect((await visitor.get("/")).status).toBe(200);
  });

  test("from this site is taken, and its author is the one who is signed in", async () => {
    const { modeller, reader, address } = await newTeam("modeller", "reader");
    const visitor = new Visitor(ask);
    await visitor.signIn(modeller.email, password);
    const body = {
      parent: null,
      files: [{ path: "a.wright", text: "x" }],
      message: "First",
      author: reader.userId,
      role: "administrator",
    };
    const response = await visitor.post(
      `/sets/${address.team}/${address.set}/edit/a.wright`,
      JSON.stringify(body),
    );
    expect(response.status).toBe(200);
    const commit = await Commit.findOne({
      order: [["time", "DESC"]],
      where: { message: "First" },
      rejectOnEmpty: true,
    });
    expect(commit.authorId).toBe(modeller.userId);
  });

  test("with a body that is no save is refused", async () => {
    const { modeller, address } = await newTeam("modeller");
    const visitor = new Visitor(ask);
    await visitor.signIn(modeller.email, password);
    for (const body of ["{", "{}", '{"parent":1,"files":[],"message":""}', "[]"])
      expect((await visitor.post(`/sets/${address.team}/${address.set}/edit/a`, body)).status).toBe(400);
  });

  test("that names no length, or too large a one, is not read", async () => {
    const headers = { Origin: origin };
    const endless = new ReadableStream({ pull: (into) => into.enqueue(new Uint8Array(1000)) });
    const init = { method: "POST", headers, body: endless, duplex: "half" } as RequestInit;
    expect((await ask(new Request(`${origin}/sign-in`, init))).status).toBe(411);
    const large = { ...headers, "Content-Length": `${33 * 1024 * 1024}` };
    expect(
      (await ask(new Request(`${origin}/sign-in`, { method: "POST", headers: large, body: "x" }))).status,
    ).toBe(413);
  });
});

test("a worker is served from the build, with a policy of its own, and nothing else is", async () => {
  const worker = await new Visitor(ask).get("/w/core.worker-1a2b.js");
  expect(await worker.text()).toBe("postMessage(1)");
  expect(worker.headers.get("Content-Security-Policy")).toBe(
    "default-src 'none'; script-src 'self' 'wasm-unsafe-eval'",
  );
  expect(worker.headers.get("Content-Type")).toMatch(/^text\/javascript/);
  for (const name of [
    "none.js",
    "..%2Fsecret.js",
    "%2e%2e%2fsecret.js",
    "..%5Csecret.js",
    ".hidden.js",
    "a.css",
    "%00.js",
  ])
    expect((await new Visitor(ask).get(`/w/${name}`)).status, name).toBe(404);
});

test("reading changes nothing but when a session was last seen", async () => {
  const { modeller, address } = await newTeam("modeller");
  const visitor = new Visitor(ask);
  await visitor.signIn(modeller.email, password);
  const before = [await JournalEntry.count(), await Commit.count(), await Session.count()];
  for (const path of [
    "/",
    "/sign-out",
    `/sets/${address.team}/${address.set}`,
    `/sets/${address.team}/${address.set}/edit/new.wright`,
  ])
    await visitor.get(path);
  expect([await JournalEntry.count(), await Commit.count(), await Session.count()]).toEqual(before);
  expect((await visitor.get("/")).status).toBe(200);
});

test("with the database away, pages say so with 503, and take up again when it is back", async () => {
  const { modeller, address } = await newTeam("modeller");
  const visitor = new Visitor(ask);
  await visitor.signIn(modeller.email, password);
  const url = process.env.DATABASE_URL;
  const admin = new Client(url?.replace(/[^/]*$/, "postgres"));
  await admin.connect();
  const name = url?.split("/").at(-1);
  try {
    await admin.query(`ALTER DATABASE ${name} ALLOW_CONNECTIONS false`);
    await admin.query("SELECT pg_terminate_backend(pid) FROM pg_stat_activity WHERE datname = $1", [name]);
    const save = JSON.stringify({ parent: null, files: [{ path: "a.wright", text: "x" }], message: "x" });
    for (let i = 0; i < 15; i++) {
      expect((await visitor.get("/health")).status).toBe(503);
      const response = await visitor.post(`/sets/${address.team}/${address.set}/edit/a.wright`, save);
      expect(response.status).toBe(503);
      expect(await response.text()).toContain("database cannot be reached");
    }
  } finally {
    await admin.query(`ALTER DATABASE ${name} ALLOW_CONNECTIONS true`);
    await admin.end();
  }
  expect((await visitor.get("/health")).status).toBe(200);
});
