import compression from "compression";
import connectPgSimple from "connect-pg-simple";
import express, { type Express } from "express";
import session from "express-session";
import helmet from "helmet";
import { existsSync } from "node:fs";
import { join } from "node:path";
import type pg from "pg";
import type { Logger } from "pino";
import { pinoHttp } from "pino-http";
import { RateLimiterPostgres } from "rate-limiter-flexible";
import { sql } from "kysely";
import type { Endpoint } from "#contracts/endpoint.ts";
import type { Pool } from "./compute/pool.ts";
import type { Db } from "./database/connection.ts";
import { mountBuilds } from "./features/builds/builds.routes.ts";
import { mountLayouts } from "./features/layouts/layouts.routes.ts";
import { mountReports } from "./features/reports/reports.routes.ts";
import { mountSignIn } from "./features/sign-in/sign-in.routes.ts";
import { ABSOLUTE_LIFETIME_HOURS } from "./features/sign-in/people.repository.ts";
import { whoIsAsking } from "./features/sign-in/who-is-asking.ts";
import { HttpFault } from "./http/fault.ts";
import type { Mounted } from "./http/mount.ts";
import { renderError } from "./http/render-error.ts";
import { sameOrigin } from "./http/same-origin.ts";
import type { Settings } from "./settings.ts";

export interface AppParts {
  readonly db: Db;
  readonly pg: pg.Pool;
  readonly pool: Pool;
  readonly settings: Settings;
  readonly log: Logger;
  /** Folder of the built client, or null (tests of the API alone). */
  readonly client: string | null;
  /** Sign-in tries allowed for one address in 15 minutes. */
  readonly signInTries?: number;
}

/** The one place where the parts join. @returns the application and every endpoint it serves */
export function createApp({ db, pg: pool, pool: workers, settings, log, client, signInTries = 10 }: AppParts): { app: Express; endpoints: readonly Endpoint[] } {
  const app = express();
  const secure = settings.publicUrl?.startsWith("https:") ?? false;
  app.disable("x-powered-by");
  app.set("trust proxy", settings.proxies);
  // one query parser for all: a name given twice is a list, which no schema takes for a single value
  app.set("query parser", "simple");
  app.use(pinoHttp({
    logger: log, genReqId: () => crypto.randomUUID(), quietReqLogger: true, autoLogging: { ignore: (request) => !request.url?.startsWith("/api") },
    serializers: { req: (request: { id: string; method: string; url: string }) => ({ id: request.id, method: request.method, url: request.url.split("?")[0] }), res: (response: { statusCode: number }) => ({ status: response.statusCode }) },
  }));
  app.use(helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'none'"], scriptSrc: ["'self'"], styleSrc: ["'self'", "'unsafe-inline'"], imgSrc: ["'self'", "data:", "blob:"], fontSrc: ["'self'"], connectSrc: ["'self'"], workerSrc: ["'self'", "blob:"],
        manifestSrc: ["'self'"], formAction: ["'self'"], baseUri: ["'none'"], frameAncestors: ["'none'"], ...(secure ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    strictTransportSecurity: secure ? { maxAge: 31_536_000, includeSubDomains: true } : false,
    crossOriginOpenerPolicy: secure ? { policy: "same-origin" } : false, originAgentCluster: secure,
  }));
  app.use((request, response, next) => {
    response.setHeader("X-Request-Id", String(request.id));
    next();
  });
  app.use(compression());

  app.get("/health/live", (_request, response) => void response.json({ live: true }));
  app.get("/health/ready", async (_request, response) => {
    await sql`select 1`.execute(db);
    response.json({ ready: true, work: workers.load() });
  });

  const api = express.Router();
  const Store = connectPgSimple(session);
  const cookie = { name: secure ? "__Host-handbreadth" : "handbreadth", httpOnly: true, sameSite: "lax", secure, path: "/" } as const;
  const { name: cookieName, ...cookieOptions } = cookie;
  api.use("/api", (_request, response, next) => {
    response.setHeader("Cache-Control", "no-store");
    next();
  });
  api.use("/api", sameOrigin(settings.publicUrl));
  api.use("/api", session({
    store: new Store({ pool, tableName: "session", createTableIfMissing: false, pruneSessionInterval: 3600, errorLog: (...words: unknown[]) => log.warn(words.map(String).join(" ")) }),
    name: cookieName, secret: settings.sessionSecret, resave: false, saveUninitialized: false, rolling: false,
    cookie: { ...cookieOptions, maxAge: ABSOLUTE_LIFETIME_HOURS * 3_600_000 },
  }));
  api.use("/api", whoIsAsking(db, { demo: !settings.production }));

  const limiter = (keyPrefix: string, points: number) => new RateLimiterPostgres({ storeClient: pool, storeType: "pool", tableName: "rate_limit", tableCreated: true, keyPrefix, points, duration: 15 * 60 });
  const mounted: Mounted = { router: api, endpoints: [], options: { db, checkResponses: !settings.production } };
  mountSignIn(mounted, db, { production: settings.production, cookie, limits: { byAddress: limiter("address", signInTries), byOrigin: limiter("origin", signInTries * 10) } });
  mountBuilds(mounted, db);
  mountLayouts(mounted, db, workers);
  mountReports(mounted, db, workers);
  api.all("/api/{*path}", () => {
    throw new HttpFault("not-found", "There is nothing at this address.");
  });
  app.use(api);

  if (client !== null && existsSync(join(client, "index.html"))) serveClient(app, client);
  app.use(() => {
    throw new HttpFault("not-found", "There is nothing at this address.");
  });
  app.use(renderError);
  return { app, endpoints: mounted.endpoints };
}

/** Hashed files are kept for good; every other address of a page gets the application's one page. */
function serveClient(app: Express, client: string): void {
  app.use("/assets", express.static(join(client, "assets"), { immutable: true, maxAge: "365d", fallthrough: false }));
  app.use(express.static(client, { index: false, maxAge: "1h" }));
  app.get("/{*path}", (request, response, next) => {
    // an address that looks like a file and is none is not a page
    if (/\.[^/]*$|\/\./.test(request.path)) return next();
    response.setHeader("Cache-Control", "no-cache");
    response.sendFile(join(client, "index.html"));
  });
}
