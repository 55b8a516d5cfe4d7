/** The mark as it would be drawn on a sheet: four fingers between two hatched walls, with its dimension. */
export function HandbreadthDrawing() {
  const fingers = [
    { x: 132, top: 122, bottom: 300 }, { x: 186, top: 88, bottom: 306 }, { x: 240, top: 76, bottom: 306 }, { x: 294, top: 106, bottom: 300 },
  ];
  const W = 50;
  return (
    <svg viewBox="0 0 480 350" className="w-full max-w-[560px] self-start" role="img" aria-label="Four fingers held between two walls, dimensioned: a handbreadth">
      <g fill="none" stroke="currentColor">
        <g strokeWidth="0.9" opacity="0.75">
          {Array.from({ length: 13 }, (_, i) => <path key={i} d={`M${86} ${62 + i * 21}l30 -30`} />)}
          {Array.from({ length: 13 }, (_, i) => <path key={i} d={`M${360} ${62 + i * 21}l30 -30`} />)}
        </g>
        <path d="M116 28v300M360 28v300" strokeWidth="3" />
        {fingers.map(({ x, top, bottom }) => (
          <g key={x}>
            <rect x={x} y={top} width={W} height={bottom - top} rx={W / 2} strokeWidth="2" fill="var(--lit)" />
            <path d={`M${x + 10} ${top + 82}h30M${x + 10} ${top + 88}h30M${x + 11} ${top + 148}h28`} strokeWidth="1" opacity="0.6" />
            <path d={`M${x + 15} ${top + 32}v-9a10 10 0 0 1 20 0v9`} strokeWidth="1" opacity="0.6" />
          </g>
        ))}
        <g stroke="var(--datum)" strokeWidth="1.2"><path d="M238 12v326" strokeDasharray="22 5 3 5" /></g>
        <path d="M116 24V4M360 24V4M116 10h244" strokeWidth="1" />
        <path d="M116 10l12-3.500v7zM360 10l-12-3.500v7z" fill="currentColor" stroke="none" />
      </g>
      <rect x="176" y="0" width="124" height="21" fill="var(--film)" />
      <text x="238" y="16" textAnchor="middle" className="num" fontSize="15" fill="currentColor">a handbreadth</text>
    </svg>
  );
}
