import { beforeAll, describe, expect, test } from "vitest";
import { changePassword } from "../../app/operations/change-password.server.ts";
import { signIn } from "../../app/operations/sign-in.server.ts";
import { holderOf, sessionIdOf } from "../../app/session/token.server.ts";
import { Session, User } from "../../db/models/index.ts";
import { testDatabase } from "../support/database.ts";
import { newPerson, password } from "./people.ts";
import { newRouter, Visitor } from "./router.ts";

let ask: Awaited<ReturnType<typeof newRouter>>;

beforeAll(async () => {
  await testDatabase();
  ask = await newRouter();
});

async function signedInVisitor() {
  const person = await newPerson();
  const visitor = new Visitor(ask);
  const response = await visitor.signIn(person.email, password);
  expect(response.status).toBe(302);
  return { person, visitor, response };
}

const isIn = async (visitor: Visitor) => (await visitor.get("/")).status === 200;

describe("signing in", () => {
  test("with the right password opens a session whose token the database does not hold", async () => {
    const { visitor, response } = await signedInVisitor();
    expect(response.headers.get("Location")).toBe("/");
    expect(response.headers.get("Set-Cookie")).toMatch(
      /^bondwright=[^;]+; Max-Age=\d+; Path=\/; HttpOnly; SameSite=Lax$/,
    );
    expect(await isIn(visitor)).toBe(true);
    const { token } = (await signIn({ email: "p1@example.org", password, userAgent: "" })) as {
      token: string;
    };
    expect(Buffer.from(token, "base64url")).toHaveLength(32);
    expect(JSON.stringify(await Session.findAll())).not.toContain(token);
  });

  test("takes the address in any case and the password in any composition", async () => {
    const person = await newPerson();
    const composed = "fünf Möwen über Ålesund";
    const { hashPassword } = await import("../../app/session/password.server.ts");
    await User.update({ passwordHash: await hashPassword(composed) }, { where: { id: person.userId } });
    const result = await signIn({
      email: ` ${person.email.toUpperCase()} `,
      password: composed.normalize("NFD"),
      userAgent: "",
    });
    expect(result.kind).toBe("signed-in");
  });

  test("is refused alike for a wrong password, an unknown address and a disabled person", async () => {
    const [known, disabled] = [await newPerson(), await newPerson()];
    await User.update({ disabledAt: new Date() }, { where: { id: disabled.userId } });
    const bodies = [];
    for (const [email, tried] of [
      [known.email, "three grey gulls want"],
      ["nobody@example.org", password],
      [disabled.email, password],
    ]) {
      const response = await new Visitor(ask).signIn(email, tried);
      expect(response.status).toBe(401);
      expect(response.headers.get("Set-Cookie")).toBeNull();
      bodies.push(await response.text());
    }
    expect(new Set(bodies).size).toBe(1);
  });

  test("goes on to a page of ours only", async () => {
    const person = await newPerson();
    for (const [next, target] of [
      ["/sets/a/b?file=c", "/sets/a/b?file=c"],
      ["//evil.example", "/"],
      ["/\\evil.example", "/"],
      ["https://evil.example/", "/"],
      ["/..//evil.example", "/"],
    ]) {
      const visitor = new Visitor(ask);
      const response = await visitor.post(`/sign-in?next=${encodeURIComponent(next)}`, {
        email: person.email,
        password,
      });
      expect(response.headers.get("Location"), next).toBe(target);
    }
  });

  test("101 wrong tries at once: at most 100 are evaluated, and then the right one waits too", async () => {
    const { email } = await newPerson();
    const tries = Array.from({ length: 101 }, () =>
      signIn({ email, password: "wrong but long enough", userAgent: "" }),
    );
    const kinds = (await Promise.all(tries)).map(({ kind }) => kind);
    expect(kinds.filter((kind) => kind === "refused").length).toBeLessThanOrEqual(100);
    const response = await new Visitor(ask).post(
      "/sign-in",
      { email, password },
      { Origin: "http://127.0.0.1:4000", "X-Forwarded-For": "203.0.113.9" },
    );
    expect(response.status).toBe(429);
  });
});

describe("a session", () => {
  test("ends with sign-out, and a copy of its cookie opens nothing", async () => {
    const { visitor } = await signedInVisitor();
    const copy = new Visitor(ask);
    copy.cookie = visitor.cookie;
    expect((await visitor.post("/sign-out", {})).headers.get("Set-Cookie")).toMatch(
      /^bondwright=; Max-Age=0;/,
    );
    expect(await isIn(copy)).toBe(false);
  });

  test("that was slipped to a browser is dead after its owner signs in", async () => {
    const attacker = await signedInVisitor();
    const victim = new Visitor(ask);
    victim.cookie = attacker.visitor.cookie;
    const person = await newPerson();
    await victim.signIn(person.email, password);
    expect(victim.cookie).not.toBe(attacker.visitor.cookie);
    expect(await isIn(victim)).toBe(true);
    expect(await isIn(attacker.visitor)).toBe(false);
  });

  test.each([
    [
      "expired",
      (id: string) => Session.update({ expiresAt: new Date(Date.now() - 1) }, { where: { userId: id } }),
    ],
    ["revoked", (id: string) => Session.update({ revokedAt: new Date() }, { where: { userId: id } })],
    ["of a disabled person", (id: string) => User.update({ disabledAt: new Date() }, { where: { id } })],
  ])("%s is closed from the next request on", async (_, end) => {
    const { person, visitor } = await signedInVisitor();
    await end(person.userId);
    expect((await visitor.get("/")).headers.get("Location")).toBe("/sign-in?next=%2F");
  });

  test("is not opened by a made-up, overlong or malformed cookie", async () => {
    for (const cookie of [
      "bondwright=x",
      "bondwright=%",
      "bondwright=e30%3D",
      `bondwright=${"A".repeat(9000)}`,
    ]) {
      const visitor = new Visitor(ask);
      visitor.cookie = cookie;
      expect(await isIn(visitor)).toBe(false);
    }
  });

  test("ends everywhere else when the password changes", async () => {
    const { email } = await newPerson();
    const open = async () => (await signIn({ email, password, userAgent: "" })) as { token: string };
    const [here, elsewhere] = [await open(), await open()];
    const actor = await holderOf(here.token);
    if (!actor) throw new Error("not signed in");
    expect(
      await changePassword(actor, { current: "not this one at all", wanted: "four grey gulls wait" }),
    ).toMatchObject({
      kind: "refused",
    });
    expect(await changePassword(actor, { current: password, wanted: "too short" })).toMatchObject({
      kind: "refused",
    });
    expect(await changePassword(actor, { current: password, wanted: "four grey gulls wait" })).toEqual({
      kind: "changed",
    });
    expect(await holderOf(elsewhere.token)).toBeNull();
    expect((await holderOf(here.token))?.sessionId).toBe(sessionIdOf(here.token));
    expect((await signIn({ email, password, userAgent: "" })).kind).toBe("refused");
    expect((await signIn({ email, password: "four grey gulls wait", userAgent: "" })).kind).toBe("signed-in");
  });
});
