// `npm run dev`: the client with reload in front of a server of its own; open the address that Vite says. The server is not rebuilt while it runs.
import { spawn } from "node:child_process";
import { join } from "node:path";
import { ROOT } from "./install.js";
import { makeReady, serve } from "./serve.js";

const environment = await makeReady();
const app = serve({ ...environment, PORT: process.env.PORT ?? "0" });
app.once("message", (/** @type {{ listening: number }} */ message) => {
  const vite = spawn(process.execPath, [join(ROOT, "node_modules/vite/bin/vite.js")], { cwd: ROOT, stdio: "inherit", env: { ...process.env, API_URL: `http://127.0.0.1:${message.listening}` } });
  vite.on("exit", () => app.kill("SIGTERM"));
});
