import { useLayoutEffect, useRef, useState, type ReactNode } from "react";
import { useEditor } from "./editor-context.ts";
import { frameAll, setSizes, type WorkspaceSizes } from "./framing.ts";
import { TAPE, Tape } from "./tape.tsx";
import { Tools } from "./tools.tsx";
import { ViewPane } from "./view-pane.tsx";

export { frameAll, frameKeys, framePair } from "./framing.ts";

const NARROW = 760;

/** How the paper is shared out: plan over side, the section beside the side view as wide as it needs. */
function share(width: number, height: number, alone: boolean): WorkspaceSizes {
  const sectionWidth = alone && width < NARROW ? 0 : Math.round(Math.min(480, Math.max(280, width * 0.29)));
  const planHeight = Math.round((height - TAPE) * 0.55);
  return { width: width - (sectionWidth > 0 ? sectionWidth + 1 : 0), planHeight, sideHeight: height - TAPE - planHeight, sectionWidth };
}

/** The drawing sheet: plan over side, the section beside the side view, the tape between, the ticket in the free quadrant. */
export function Workspace({ ticket, tools = <Tools /> }: { ticket: ReactNode; tools?: ReactNode }) {
  const { store } = useEditor();
  const frame = useRef<HTMLDivElement>(null);
  const [size, setSize] = useState({ width: 0, height: 0 });
  useLayoutEffect(() => {
    const element = frame.current!;
    const observer = new ResizeObserver(() => setSize({ width: element.clientWidth, height: element.clientHeight }));
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  const sizes = share(size.width, size.height, ticket === null);
  const ready = size.width > 300 && size.height > 200;
  const fitted = useRef(false);
  useLayoutEffect(() => {
    if (!ready) return;
    setSizes(sizes);
    if (fitted.current) return;
    fitted.current = true;
    frameAll(store.state.getState().document, true);
  });
  const shared = { planHeight: sizes.planHeight, sideHeight: sizes.sideHeight, sectionWidth: sizes.sectionWidth };
  const section = sizes.sectionWidth > 0;
  return (
    <div ref={frame} className="relative min-h-0 flex-1 overflow-hidden bg-film">
      {ready && (
        <div className="grid h-full" style={{ gridTemplateColumns: section ? `${sizes.width}px 1px ${sizes.sectionWidth}px` : "1fr", gridTemplateRows: `${sizes.planHeight}px ${TAPE}px ${sizes.sideHeight}px` }}>
          <div className="relative min-w-0">
            <ViewPane view="plan" width={sizes.width} height={sizes.planHeight} {...shared} />
            <div className="absolute right-3 top-2">{tools}</div>
          </div>
          {section && <div className="row-span-3 bg-hair" />}
          {section && <div className="row-span-2 min-h-0 overflow-y-auto border-b border-hair">{ticket}</div>}
          <Tape width={sizes.width} />
          <ViewPane view="side" width={sizes.width} height={sizes.sideHeight} {...shared} />
          {section && <ViewPane view="rear" width={sizes.sectionWidth} height={sizes.sideHeight} {...shared} />}
        </div>
      )}
    </div>
  );
}
