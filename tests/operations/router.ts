import { readdirSync } from "node:fs";
import { dirname, join } from "node:path";
import {
  type ActionFunction,
  createRequestHandler,
  isRouteErrorResponse,
  type LoaderFunction,
  RouterContextProvider,
  type ServerBuild,
} from "react-router";
import * as root from "../../app/root.server.ts";
import routes from "../../app/routes.ts";

const app = new URL("../../app/", import.meta.url).pathname;

interface ServerHalf {
  loader?: LoaderFunction;
  action?: ActionFunction;
}

/** The server half of the root and of every route of `routes.ts`: what the modules beside its page export. */
export async function serverHalves() {
  const rootModule: ServerHalf = { loader: root.loader as LoaderFunction };
  const halves: { id: string; path?: string; index?: boolean; module: ServerHalf }[] = [
    { id: "root", path: "", module: rootModule },
  ];
  for (const { file, path, index } of routes) {
    const folder = dirname(join(app, file));
    const module: ServerHalf = {};
    for (const name of readdirSync(folder).filter((name) => name.endsWith(".server.ts")))
      Object.assign(module, await import(join(folder, name)));
    halves.push({ id: file, path, index, module });
  }
  return halves;
}

/**
 * All routes with the root's middleware, but with no page: an answer that would be a page is the JSON of what the
 * page would be given.
 */
export async function newRouter() {
  const routesOfBuild: Record<string, unknown> = {};
  for (const { module, ...half } of await serverHalves()) {
    const parent = half.id === "root" ? { middleware: root.middleware } : {};
    // A route that is no `.tsx` has no page: what it answers is the response itself.
    const page = half.id.endsWith(".ts") ? {} : { default: () => null };
    const parentId = half.id === "root" ? undefined : "root";
    routesOfBuild[half.id] = { ...half, parentId, module: { ...page, ...parent, ...module } };
  }
  const build = {
    entry: {
      module: {
        default: (_: Request, status: number, headers: Headers, { staticHandlerContext }: EntryContext) => {
          const { loaderData, actionData, errors } = staticHandlerContext;
          const error = Object.values(errors ?? {}).map((e) =>
            isRouteErrorResponse(e) ? e.data : String(e),
          )[0];
          return new Response(JSON.stringify({ loaderData, actionData, error }), { status, headers });
        },
        handleError: () => {},
      },
    },
    routes: routesOfBuild,
    assets: { version: "1", url: "", entry: { module: "", imports: [] }, routes: {} },
    publicPath: "/",
    assetsBuildDirectory: "",
    future: { v8_middleware: true, v8_passThroughRequests: true },
    ssr: true,
    isSpaMode: false,
    prerender: [],
    routeDiscovery: { mode: "initial", manifestPath: "" },
  } as unknown as ServerBuild;
  const handle = createRequestHandler(build, "production");
  return (request: Request) => handle(request, new RouterContextProvider());
}

interface EntryContext {
  staticHandlerContext: { loaderData: unknown; actionData: unknown; errors?: Record<string, unknown> };
}

export const origin = "http://127.0.0.1:4000";

/** A browser without pages: it keeps the cookie and names its origin. */
export class Visitor {
  cookie = "";
  readonly #ask: (request: Request) => Promise<Response>;

  constructor(ask: (request: Request) => Promise<Response>) {
    this.#ask = ask;
  }

  async get(path: string, headers: HeadersInit = {}) {
    return this.#keep(await this.#ask(this.#request(path, { headers })));
  }

  async post(path: string, body: Record<string, string> | string, headers: HeadersInit = { Origin: origin }) {
    const text = typeof body === "string" ? body : new URLSearchParams(body).toString();
    const type = typeof body === "string" ? "application/json" : "application/x-www-form-urlencoded";
    const request = this.#request(path, { method: "POST", body: text, headers });
    request.headers.set("Content-Type", type);
    request.headers.set("Content-Length", String(Buffer.byteLength(text)));
    return this.#keep(await this.#ask(request));
  }

  async signIn(email: string, password: string) {
    return this.post("/sign-in", { email, password });
  }

  #request(path: string, init: RequestInit): Request {
    const request = new Request(new URL(path, origin), init);
    if (this.cookie) request.headers.set("Cookie", this.cookie);
    return request;
  }

  #keep(response: Response): Response {
    const given = response.headers.get("Set-Cookie");
    if (given) this.cookie = given.split(";")[0];
    return response;
  }
}
