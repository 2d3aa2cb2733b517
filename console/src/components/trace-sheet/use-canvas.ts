import { useEffect, useRef, type RefObject } from 'react';

export type Paint = (context: CanvasRenderingContext2D, size: { width: number; height: number }) => void;

/**
 * A canvas that fills its parent's width, sharp on every screen, and is painted again when `paint` or the width changes.
 *
 * @param paint keep its identity while the drawing is the same
 */
export function useCanvas(paint: Paint, heightPx: number): RefObject<HTMLCanvasElement | null> {
  const canvasRef = useRef<HTMLCanvasElement | null>(null);
  useEffect(() => {
    const canvas = canvasRef.current;
    const context = canvas?.getContext('2d') ?? null;
    if (!canvas?.parentElement || !context) return;
    const frame = canvas.parentElement;
    const draw = () => {
      const [width, height, ratio] = [frame.clientWidth, heightPx, devicePixelRatio];
      canvas.width = Math.round(width * ratio);
      canvas.height = Math.round(height * ratio);
      canvas.style.width = `${width}px`;
      canvas.style.height = `${height}px`;
      context.setTransform(ratio, 0, 0, ratio, 0, 0);
      paint(context, { width, height });
    };
    draw();
    const observer = new ResizeObserver(draw);
    observer.observe(frame);
    return () => observer.disconnect();
  }, [paint, heightPx]);
  return canvasRef;
}
