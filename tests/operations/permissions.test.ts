import { readFile } from "node:fs/promises";
import { beforeAll, describe, expect, test } from "vitest";
import { readFiles } from "../../app/operations/read-files.server.ts";
import { saveFiles } from "../../app/operations/save-files.server.ts";
import routes from "../../app/routes.ts";
import { doorOf } from "../../app/session/door.server.ts";
import { permissionsOf } from "../../app/session/permissions.server.ts";
import { Commit, JournalEntry, Membership, roles } from "../../db/models/index.ts";
import { testDatabase } from "../support/database.ts";
import { newPerson, newTeam, password } from "./people.ts";
import { newRouter, serverHalves, Visitor } from "./router.ts";

/** What each role may do: the product's promise, written a second time on purpose. */
const promised = {
  reader: ["set.read"],
  modeller: ["set.read", "set.write"],
  reviewer: ["set.read", "set.write", "change.review"],
  release_keeper: ["set.read", "set.write", "change.review", "release.make"],
  administrator: ["set.read", "set.write", "change.review", "release.make", "team.administer"],
};

/** Who passes each loader and action, and what the role must allow. A route that is not named here fails. */
const table: Record<string, { loader?: string; action?: string }> = {
  root: { loader: "anyone" },
  "routes/my-sets/route.tsx": { loader: "signed-in" },
  "routes/sign-in/route.tsx": { loader: "anyone", action: "anyone" },
  "routes/sign-out/route.ts": { loader: "anyone", action: "anyone" },
  "routes/set-overview/route.tsx": { loader: "set.read" },
  "routes/edit-file/route.tsx": { loader: "set.read", action: "set.write" },
  "routes/set-history/route.tsx": { loader: "set.read" },
  "routes/show-commit/route.tsx": { loader: "set.read" },
  "routes/show-file/route.tsx": { loader: "set.read" },
  "routes/reference/route.tsx": { loader: "signed-in" },
  "routes/explain-finding/route.tsx": { loader: "signed-in" },
  "routes/worker/route.ts": { loader: "anyone" },
  "routes/health/route.ts": { loader: "anyone" },
  "routes/not-found/route.tsx": { loader: "anyone", action: "anyone" },
};

let ask: Awaited<ReturnType<typeof newRouter>>;

beforeAll(async () => {
  await testDatabase();
  ask = await newRouter();
});

/** A team whose set holds one commit. */
async function teamWithCommit() {
  const team = await newTeam(...roles);
  const files = [{ path: "a.wright", text: "text of the set" }];
  const saved = await saveFiles(team.modeller, {
    ...team.address,
    branch: "main",
    parent: null,
    files,
    message: "First",
  });
  if (saved.kind !== "saved") throw new Error(saved.kind);
  return { ...team, commit: saved.commit.oid };
}

async function visitorFor({ email }: { email: string }) {
  const visitor = new Visitor(ask);
  await visitor.signIn(email, password);
  return visitor;
}

/** Every address of every guarded route, filled in; the action as a save that would succeed. */
async function requestsFor(address: { team: string; set: string }, commit: string) {
  const requests = [];
  for (const { id, path, module } of await serverHalves()) {
    const filled = (path ?? "")
      .replace(":team", address.team)
      .replace(":set", address.set)
      .replace(":commit", commit)
      .replace("*", "a.wright");
    for (const kind of ["loader", "action"] as const) {
      if (module[kind] && table[id]?.[kind]?.includes("."))
        requests.push({ path: `/${filled}`, kind, permission: table[id][kind] });
    }
  }
  return requests;
}

const saveOn = (parent: string) =>
  JSON.stringify({ parent, files: [{ path: `f${Math.random()}.wright`, text: "x" }], message: "x" });
const send = (visitor: Visitor, kind: "loader" | "action", path: string, commit: string) =>
  kind === "loader" ? visitor.get(path) : visitor.post(path, saveOn(commit));

const written = async () => [await Commit.count(), await JournalEntry.count()];

test("the roles allow what was promised, and nothing else", () => {
  for (const role of roles) expect(permissionsOf(role)).toEqual(promised[role]);
});

test("every loader and action of every route stands in the table and has the door it says", async () => {
  const found = Object.fromEntries(
    (await serverHalves()).map(({ id, module }) => [
      id,
      Object.fromEntries(
        (["loader", "action"] as const)
          .filter((kind) => module[kind])
          .map((kind) => [kind, doorOf(module[kind] as object)]),
      ),
    ]),
  );
  const said = Object.fromEntries(
    Object.entries(table).map(([id, kinds]) => [
      id,
      Object.fromEntries(
        Object.entries(kinds).map(([kind, who]) => [kind, who.includes(".") ? "signed-in" : who]),
      ),
    ]),
  );
  expect(found).toEqual(said);
});

test("a page has no loader or action of its own beside those of its server half", async () => {
  for (const { file } of routes) {
    const page = await readFile(new URL(`../../app/${file}`, import.meta.url), "utf8");
    expect(page, file).not.toMatch(/export\s+(async\s+)?(function|const|let)\s+(loader|action)\b/);
    for (const [, from] of page.matchAll(/export\s*\{[^}]*\b(?:loader|action)\b[^}]*\}\s*from\s*"([^"]+)"/g))
      expect(from, file).toMatch(/^\.\/[a-z-]+\.server\.ts$/);
  }
});

describe("every guarded address", () => {
  test.each(roles)("answers a %s as the role table says", async (role) => {
    const team = await teamWithCommit();
    const visitor = await visitorFor(team[role]);
    for (const { path, kind, permission } of await requestsFor(team.address, team.commit)) {
      const before = await written();
      const { status } = await send(visitor, kind, path, team.commit);
      const allowed = promised[role].includes(permission as string);
      expect(status, `${kind} ${path}`).toBe(allowed ? 200 : 403);
      if (!allowed) expect(await written()).toEqual(before);
    }
  });

  test("shows nobody who is not signed in anything, also when asked for a part of a page", async () => {
    const team = await teamWithCommit();
    const before = await written();
    const visitor = new Visitor(ask);
    for (const { path, kind } of await requestsFor(team.address, team.commit)) {
      const refused = kind === "loader" ? [202, 302] : [401];
      expect((await send(visitor, kind, path, team.commit)).status, path).toBeOneOf(refused);
      expect((await send(visitor, kind, `${path}.data`, team.commit)).status, path).toBeOneOf(refused);
      for (const { id } of await serverHalves()) {
        const part = await visitor.get(`${path}.data?_routes=${encodeURIComponent(id)}`);
        expect(await part.text()).not.toContain("text of the set");
      }
    }
    expect(await written()).toEqual(before);
  });

  test("answers another team as if nothing were there", async () => {
    const [team, other] = [await teamWithCommit(), await teamWithCommit()];
    const visitor = await visitorFor(other.administrator);
    const before = await written();
    const foreign = await requestsFor(team.address, team.commit);
    const absent = await requestsFor({ team: "no-such-team", set: "none" }, "0".repeat(40));
    for (const [i, { path, kind }] of foreign.entries()) {
      const theirs = await send(visitor, kind, path, team.commit);
      const nothing = await send(visitor, kind, absent[i].path, team.commit);
      expect(theirs.status).toBe(404);
      expect(await theirs.text()).toBe(await nothing.text());
    }
    // Its own set, but the other's objects.
    for (const { path, kind } of await requestsFor(other.address, team.commit))
      if (path.includes(team.commit))
        expect((await send(visitor, kind, path, other.commit)).status).toBe(404);
    expect(await written()).toEqual(before);
    expect(await (await visitor.get("/")).text()).not.toContain(team.address.team);
  });

  test("follows a role that is taken away at the next request", async () => {
    const team = await teamWithCommit();
    const visitor = await visitorFor(team.modeller);
    const path = `/sets/${team.address.team}/${team.address.set}/edit/a.wright`;
    expect((await visitor.post(path, saveOn(team.commit))).status).toBe(200);
    const membership = { teamId: team.key.teamId, userId: team.modeller.userId };
    await Membership.update({ role: "reader" }, { where: membership });
    expect((await visitor.post(path, saveOn(team.commit))).status).toBe(403);
    await Membership.destroy({ where: membership });
    expect((await visitor.get(path)).status).toBe(404);
  });
});

test("a person without a team sees none", async () => {
  const visitor = await visitorFor(await newPerson());
  expect(await (await visitor.get("/")).text()).toContain('"teams":[]');
});

test("commits are named in full: no shorter name, and no trick in its place", async () => {
  const team = await teamWithCommit();
  for (const commit of [
    team.commit.slice(0, 12),
    team.commit.toUpperCase(),
    "refs/heads/main",
    "' OR 1=1",
    "__proto__",
  ])
    await expect(readFiles(team.reader, { ...team.address, commit })).rejects.toMatchObject({
      init: { status: 404 },
    });
});
