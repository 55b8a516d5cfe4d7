import { buildBody, setPose, type Body } from "../geometry/body.ts";
import type { Piece, Pose } from "../geometry/piece.ts";

/** Pieces at a pose. */
export function placedBody(pieces: readonly Piece[], pose: Pose): Body {
  const body = buildBody(pieces);
  setPose(body, pose);
  return body;
}

/**
 * The same pieces at another pose, the given body staying where it is: what is local is shared, what is of the world is new. Equal to the
 * bit to a body built anew there; costs a few microseconds instead of building.
 */
export function movedBody(body: Body, pose: Pose): Body {
  const copy: Body = { ...body, world: body.world.slice(), boxes: body.boxes.slice(), middles: body.middles.slice() };
  setPose(copy, pose);
  return copy;
}
