import { useEffect, useRef, useState, type RefObject } from 'react';
import uPlot from 'uplot';
import 'uplot/dist/uPlot.min.css';
import { uplotOptions, type ChartLook } from './uplot-options.js';

interface UplotHandle {
  /** Put on the element that the chart is to fill; its width is followed. */
  frameRef: RefObject<HTMLDivElement | null>;
  /** The chart once it is there; made anew when its look changes. */
  chart: uPlot | null;
}

/** A uPlot chart in an element: made, remade on a new look, resized with the element, and taken down. */
export function useUplot(look: ChartLook, heightPx: number): UplotHandle {
  const frameRef = useRef<HTMLDivElement | null>(null);
  const [chart, setChart] = useState<uPlot | null>(null);
  useEffect(() => {
    const frame = frameRef.current;
    if (!frame) return;
    const empty = [[], ...look.traces.map(() => [])] as unknown as uPlot.AlignedData;
    const made = new uPlot(uplotOptions(look, frame.clientWidth, heightPx), empty, frame);
    setChart(made);
    const observer = new ResizeObserver(() => made.setSize({ width: frame.clientWidth, height: heightPx }));
    observer.observe(frame);
    return () => {
      observer.disconnect();
      made.destroy();
      setChart(null);
    };
  }, [look, heightPx]);
  return { frameRef, chart };
}
