import { index, type RouteConfig, route } from "@react-router/dev/routes";

/** Every address of the product. A folder holds a route's page and, in `*.server.ts`, its server half. */
export default [
  index("routes/my-sets/route.tsx"),
  route("sign-in", "routes/sign-in/route.tsx"),
  route("sign-out", "routes/sign-out/route.ts"),
  route("sets/:team/:set", "routes/set-overview/route.tsx"),
  route("sets/:team/:set/edit/*", "routes/edit-file/route.tsx"),
  route("sets/:team/:set/history", "routes/set-history/route.tsx"),
  route("sets/:team/:set/commits/:commit", "routes/show-commit/route.tsx"),
  route("sets/:team/:set/files/:commit/*", "routes/show-file/route.tsx"),
  route("reference", "routes/reference/route.tsx"),
  route("reference/findings/:name", "routes/explain-finding/route.tsx"),
  route("w/:name", "routes/worker/route.ts"),
  route("health", "routes/health/route.ts"),
  // The middleware does not run for an address without a route; this one gives the rest their headers.
  route("*", "routes/not-found/route.tsx"),
] satisfies RouteConfig;
