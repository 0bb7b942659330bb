import { useCallback, useEffect, useLayoutEffect, useRef, useState, type ReactNode } from 'react';

interface ScrollAreaProps {
  /** What scrolls, read out when it takes the focus. */
  label: string;
  className?: string;
  children: ReactNode;
}

/** Scrolls inside itself; it takes a tab stop only while there is something to scroll, so that keys can reach it. */
export function ScrollArea({ label, className, children }: ScrollAreaProps) {
  const area = useRef<HTMLDivElement>(null);
  const [scrolls, setScrolls] = useState(false);
  const measure = useCallback(() => {
    const element = area.current;
    if (!element) return;
    setScrolls(element.scrollWidth > element.clientWidth + 1 || element.scrollHeight > element.clientHeight + 1);
  }, []);
  // Content can grow without its first child resizing (rows loaded, a button added), so every render measures.
  useLayoutEffect(measure);
  useEffect(() => {
    const element = area.current;
    if (!element) return;
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    if (element.firstElementChild) observer.observe(element.firstElementChild);
    return () => observer.disconnect();
  }, [measure]);
  return (
    <div ref={area} className={className} {...(scrolls && { tabIndex: 0, role: 'region', 'aria-label': label })}>
      {children}
    </div>
  );
}
