import type { Config } from "@react-router/dev/config";

export default {
  buildDirectory: "build/app", // emptied by each build, and there is more in build/
  // The list of addresses comes with the first page: asked for later, it would pass no middleware.
  routeDiscovery: { mode: "initial" },
  future: {
    v8_middleware: true,
    v8_passThroughRequests: true,
    v8_splitRouteModules: true,
    v8_trailingSlashAwareDataRequests: true,
    v8_viteEnvironmentApi: true,
  },
} satisfies Config;
