import { useEffect, useRef, type ReactNode } from 'react';
import { useLocation } from 'react-router';

interface PageHeadProps {
  title: string;
  /** One sentence that says the state in words. */
  sentence?: ReactNode;
  crumb?: ReactNode;
}

/** Title, state in one sentence, and focus on the title after a change of page. */
export function PageHead({ title, sentence, crumb }: PageHeadProps) {
  const heading = useRef<HTMLHeadingElement>(null);
  const { pathname, key } = useLocation();
  useEffect(() => {
    // The first page of a visit keeps the browser's own order: the way to the content comes first.
    if (key === 'default') return;
    if (document.activeElement === document.body || document.activeElement?.closest('nav'))
      heading.current?.focus();
  }, [pathname, key]);
  return (
    <div className="mb-6">
      <title>{`${title} – Tallyweir`}</title>
      {crumb && <p className="text-sm text-muted mb-1">{crumb}</p>}
      <h1 ref={heading} tabIndex={-1}>
        {title}
      </h1>
      {sentence && <p className="mt-1 max-w-[96ch]">{sentence}</p>}
    </div>
  );
}

interface SectionProps {
  title: string;
  aside?: ReactNode;
  children: ReactNode;
  id?: string;
}

export function Section({ title, aside, children, id }: SectionProps) {
  return (
    <section className="mt-8 first:mt-0 min-w-0" id={id}>
      <div className="flex flex-wrap items-baseline gap-x-4 mb-3">
        <h2>{title}</h2>
        {aside && <div className="ml-auto text-sm text-muted">{aside}</div>}
      </div>
      {children}
    </section>
  );
}

/** Left two thirds, right one third; one column on a phone. */
export function TwoColumns({ left, right }: { left: ReactNode; right: ReactNode }) {
  return (
    <div className="grid gap-8 items-start lg:grid-cols-[minmax(0,8fr)_minmax(0,4fr)]">
      <div className="min-w-0">{left}</div>
      <div className="min-w-0">{right}</div>
    </div>
  );
}

/** A table or chart that may be wider than the screen scrolls in its own labelled box. */
export function ScrollBox({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div className="sheet scroll" role="region" aria-label={label} tabIndex={0}>
      {children}
    </div>
  );
}
