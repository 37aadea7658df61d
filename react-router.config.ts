import type { Config } from "@react-router/dev/config";

export default {
  buildDirectory: "build/app", // emptied by each build, and there is more in build/
  future: {
    v8_middleware: true,
    v8_passThroughRequests: true,
    v8_splitRouteModules: true,
    v8_trailingSlashAwareDataRequests: true,
    v8_viteEnvironmentApi: true,
  },
} satisfies Config;
