import { fileURLToPath } from "node:url";
import vue from "@vitejs/plugin-vue";
import vuetify from "vite-plugin-vuetify";
import { defineConfig } from "vitest/config";

const path = (relative: string) => fileURLToPath(new URL(relative, import.meta.url));

/** The server, its judge worker and the reporter are built by the same tool as the pages (`vite build --mode server|reporter`). */
const serverBuild = {
  ssr: true,
  outDir: path("./dist/server"),
  emptyOutDir: true,
  target: "node20",
  minify: false,
  rollupOptions: {
    input: { index: path("./server/index.ts"), judge: path("./server/ingest/judge.worker.ts") },
    output: { entryFileNames: "[name].js", chunkFileNames: "chunks/[name]-[hash].js" },
  },
} as const;

const reporterBuild = {
  ssr: true,
  outDir: path("./dist/download"),
  emptyOutDir: true,
  target: "node20",
  minify: false,
  rollupOptions: { input: { report: path("./scripts/report.ts") }, output: { entryFileNames: "[name].mjs" } },
} as const;

const pagesBuild = { outDir: path("./dist/pages"), emptyOutDir: true, target: "es2022", manifest: true } as const;

export default defineConfig(({ mode }) => {
  const forNode = mode === "server" || mode === "reporter";
  return {
    plugins: forNode ? [] : [vue(), vuetify({ autoImport: true })],
    build: mode === "server" ? serverBuild : mode === "reporter" ? reporterBuild : pagesBuild,
    ssr: mode === "reporter" ? { noExternal: true as const } : {},
    publicDir: forNode ? false : path("./src/public"),
    server: {
      port: 4381,
      proxy: Object.fromEntries(
        ["/api", "/livez", "/readyz", "/healthz", "/download", "/problems"].map((p) => [p, "http://127.0.0.1:4380"]),
      ),
    },
    test: {
      projects: [
        { extends: true, test: { name: "unit", include: ["tests/unit/**/*.test.ts"], environment: "node" } },
        { extends: true, test: { name: "numerics", include: ["tests/numerics/**/*.test.ts"], environment: "node" } },
        {
          extends: true,
          test: {
            name: "api",
            include: ["tests/api/**/*.test.ts"],
            environment: "node",
            testTimeout: 30_000,
            hookTimeout: 60_000,
          },
        },
        {
          extends: true,
          test: {
            name: "component",
            include: ["tests/component/**/*.test.ts"],
            environment: "jsdom",
            server: { deps: { inline: ["vuetify"] } },
            css: false,
          },
        },
        {
          extends: true,
          test: {
            name: "e2e",
            include: ["tests/e2e/**/*.test.ts"],
            globalSetup: path("./tests/e2e/support/serve.ts"),
            environment: "node",
            fileParallelism: false,
            testTimeout: 120_000,
            hookTimeout: 240_000,
          },
        },
      ],
    },
  };
});
