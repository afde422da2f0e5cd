import type { ReactNode } from 'react';

/** Height that the lines of a track are drawn in; a taller row stretches them. */
export const trackHeight = 44;

/** A drawing in a table cell (`relative`), as tall as the row, however many lines the words of the row take. */
export function Track({ width, children }: { width: number; children: ReactNode }) {
  return (
    <div aria-hidden style={{ width }}>
      <svg width={width} height="100%" className="absolute inset-y-0">
        {children}
      </svg>
    </div>
  );
}

/** Lines and bands that run on into the rows above and below: stretched down, never across. */
export function Running({ width, children }: { width: number; children: ReactNode }) {
  return (
    <svg
      width={width}
      height="100%"
      viewBox={`0 0 ${width} ${trackHeight}`}
      preserveAspectRatio="none"
      className="[&>*]:[vector-effect:non-scaling-stroke]"
    >
      {children}
    </svg>
  );
}

/** Marks of this row alone: y counts from the middle of the row. */
export function Marks({ children }: { children: ReactNode }) {
  return (
    <svg y="50%" className="overflow-visible">
      {children}
    </svg>
  );
}
