import { defineConfig } from "vitest/config";
import react from "@vitejs/plugin-react";
import tailwindcss from "@tailwindcss/vite";

/**
 * Two builds from one file: the browser's (`vite build` -> dist/client) and the server's (`vite build --ssr` ->
 * dist/server, one entry for each process or command). Tests run on vitest with the same aliases (package.json#imports).
 */
export default defineConfig(({ isSsrBuild }) => ({
  plugins: isSsrBuild ? [] : [react(), tailwindcss()],
  build: isSsrBuild
    ? {
        outDir: "dist/server",
        target: "node20",
        minify: false,
        sourcemap: true,
        copyPublicDir: false,
        rollupOptions: {
          input: {
            main: "server/main.ts",
            worker: "server/compute/worker.ts",
            check: "server/check.ts",
            migrate: "server/database/migrate-command.ts",
          },
          output: { entryFileNames: "[name].js", chunkFileNames: "chunks/[name]-[hash].js" },
        },
      }
    : { outDir: "dist/client", sourcemap: false, target: "es2022" },
  // `npm run dev` says where its server is; the Host header stays the page's own, so that writes count as same-origin
  server: { host: "127.0.0.1", proxy: process.env["API_URL"] ? Object.fromEntries(["/api", "/health"].map((path) => [path, { target: process.env["API_URL"]!, changeOrigin: false }])) : {} },
  test: {
    testTimeout: 30_000,
    hookTimeout: 60_000,
    pool: "forks",
    maxWorkers: 2,
    projects: [
      { extends: true, test: { name: "core", include: ["tests/**/*.test.ts", "tests/**/*.test.tsx"], exclude: ["tests/server/**", "tests/journeys/**"] } },
      // what needs PostgreSQL: the cluster is started before the first of these and never for the others
      { extends: true, test: { name: "service", include: ["tests/server/**/*.test.ts", "tests/journeys/**/*.test.ts"], globalSetup: ["tests/support/cluster.setup.ts"] } },
    ],
  },
}));
