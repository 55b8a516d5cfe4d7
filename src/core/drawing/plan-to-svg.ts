import { arcPoints } from "./overlaps.ts";
import { dashesOf, type Mark, type SheetPlan, type Stroke } from "./plan.ts";

const number = (value: number) => String(Math.round(value * 1000) / 1000 + 0);
const escape = (text: string) => text.replace(/[&<>"']/gu, (c) => `&#${c.codePointAt(0)};`);
const attributes = (stroke: Stroke | null, fill: string | null) => {
  const dashes = stroke ? dashesOf(stroke).map(number).join(" ") : "";
  return `fill="${fill ?? "none"}"${stroke ? ` stroke="${stroke.ink}" stroke-width="${number(stroke.width)}"${dashes ? ` stroke-dasharray="${dashes}"` : ""}` : ""}`;
};

/** One mark as an SVG element; what it stands for is in data-of, its layer in data-layer. */
export function markToSvg(mark: Mark): string {
  const about = `data-layer="${escape(mark.layer)}"${mark.of ? ` data-of="${escape(mark.of)}"` : ""}`;
  if (mark.kind === "text") {
    const anchor = mark.align === "left" ? "start" : mark.align === "centre" ? "middle" : "end";
    const [x, y] = mark.at.map(number);
    const turn = mark.turn === 0 ? "" : ` transform="rotate(${number(-mark.turn)} ${x} ${y})"`;
    return `<text ${about} x="${x}" y="${y}" font-size="${number(mark.size)}"${mark.weight === "bold" ? ' font-weight="700"' : ""} text-anchor="${anchor}" fill="${mark.ink}"${turn}>${escape(mark.text)}</text>`;
  }
  if (mark.kind === "line") return `<path ${about} d="M${number(mark.from[0])} ${number(mark.from[1])}L${number(mark.to[0])} ${number(mark.to[1])}" ${attributes(mark.stroke, null)}/>`;
  if (mark.kind === "arc" && mark.sweep === 360) return `<circle ${about} cx="${number(mark.centre[0])}" cy="${number(mark.centre[1])}" r="${number(mark.radius)}" ${attributes(mark.stroke, mark.fill)}/>`;
  const points = mark.kind === "arc" ? arcPoints(mark) : mark.points;
  const path = points.map((p, i) => `${i === 0 ? "M" : "L"}${number(p[0])} ${number(p[1])}`).join("");
  return `<path ${about} d="${path}${mark.kind === "polyline" && mark.closed ? "Z" : ""}" ${attributes(mark.stroke, mark.fill)}/>`;
}

/**
 * The same plan as one SVG document, a millimetre a unit, for the browser's preview and for download. Needs JetBrains Mono where it is shown; ligatures off, so
 * that every character keeps its cell.
 */
export function planToSvg(plan: SheetPlan): string {
  const { width, height } = plan.paper;
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${number(width)}mm" height="${number(height)}mm" viewBox="0 0 ${number(width)} ${number(height)}" role="img" aria-label="${escape(`${plan.title}, sheet ${plan.sheet} of ${plan.sheets}, ${plan.paper.name}`)}" font-family="'JetBrains Mono', monospace" style="font-variant-ligatures:none;font-feature-settings:'calt' 0,'liga' 0" stroke-linejoin="round">` +
    `<rect width="100%" height="100%" fill="#FFFFFF"/>${plan.marks.map(markToSvg).join("")}</svg>`;
}
