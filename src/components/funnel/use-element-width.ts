import { useLayoutEffect, useState } from 'react';

/**
 * Width of an element in pixels, kept current; 0 before the first layout. The first value is a callback ref, so that an
 * element that appears later is measured too; the third is the element itself.
 */
export function useElementWidth<E extends HTMLElement>(): [(element: E | null) => void, number, E | null] {
  const [element, setElement] = useState<E | null>(null);
  const [width, setWidth] = useState(0);
  useLayoutEffect(() => {
    if (element === null) return undefined;
    const measure = () => setWidth(element.clientWidth);
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, [element]);
  return [setElement, width, element];
}
