/** The width a picture has, so that its text keeps its size on any screen. */
import { useEffect, useState } from 'preact/hooks';

/** Never narrower: less would hold no labels. */
const NARROWEST = 280;

/** Width in CSS pixels of the element that the returned function was given. */
export function useWidth(atFirst: number): readonly [number, (element: HTMLElement | null) => void] {
  const [element, setElement] = useState<HTMLElement | null>(null);
  const [width, setWidth] = useState(atFirst);
  useEffect(() => {
    if (element === null) return undefined;
    const observer = new ResizeObserver(([entry]) => {
      if (entry !== undefined) setWidth(Math.max(NARROWEST, Math.round(entry.contentRect.width)));
    });
    observer.observe(element);
    return () => { observer.disconnect(); };
  }, [element]);
  return [width, setElement];
}
