// Build of the pages: React Router's plugin, Tailwind, and the aliases that tsconfig.json and vitest.config.ts repeat.
import path from "node:path";
import { reactRouter } from "@react-router/dev/vite";
import tailwindcss from "@tailwindcss/vite";
import { defineConfig } from "vite";

export default defineConfig({
  plugins: [tailwindcss(), reactRouter()],
  // Fonts stay files: an inlined font would need font-src data: in the content security policy.
  build: { assetsInlineLimit: 0 },
  resolve: {
    alias: [
      { find: /^~\/db\//, replacement: path.resolve("db") + "/" },
      { find: /^~\/emails\//, replacement: path.resolve("emails") + "/" },
      { find: /^~\//, replacement: path.resolve("app") + "/" },
    ],
  },
});
