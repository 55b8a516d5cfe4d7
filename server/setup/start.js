// `npm start`: everything from a fresh machine to a served application. Node's own modules only until the modules are there.
import { buildClient } from "./build.js";
import { makeReady, serve } from "./serve.js";

const environment = await makeReady();
buildClient();
serve(environment);
