// Framework settings: server rendering, every flag of the next major, and no route manifest endpoint.
import type { Config } from "@react-router/dev/config";

export default {
  ssr: true,
  buildDirectory: process.env.BUILD_FOLDER ?? "build",
  routeDiscovery: { mode: "initial" },
  future: {
    v8_middleware: true,
    v8_splitRouteModules: true,
    v8_viteEnvironmentApi: true,
  },
} satisfies Config;
