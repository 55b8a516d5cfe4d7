import { z } from "zod";
import { layoutSchema } from "./schema.ts";

/** The layout file as JSON Schema 2020-12, made from the zod schema: units and descriptions included. */
export function layoutJsonSchema(): Record<string, unknown> {
  const schema = z.toJSONSchema(layoutSchema, { io: "input", unrepresentable: "any" }) as Record<string, unknown>;
  return { ...schema, $id: "handbreadth-layout-1", title: "Handbreadth layout, version 1" };
}
