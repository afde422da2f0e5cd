import { useState, type ReactNode } from 'react';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { Panel } from '../../components/dialog.tsx';

export interface SectionProps {
  view: SiteStructureView;
}

/** A link that opens a form in a panel; the form says when it is done. */
export function FormLink({
  label,
  title = label,
  children,
}: {
  label: string;
  title?: string;
  children: (onDone: () => void) => ReactNode;
}) {
  const [isOpen, setIsOpen] = useState(false);
  const close = () => setIsOpen(false);
  return (
    <>
      <button type="button" className="link no-print" onClick={() => setIsOpen(true)}>
        {label}
      </button>
      <Panel title={title} isOpen={isOpen} onClose={close}>
        {isOpen && children(close)}
      </Panel>
    </>
  );
}

export const optionsOf = (rows: readonly { id: string; name: string; code?: string }[]) =>
  rows.map((row) => ({ value: row.id, label: row.code ? `${row.code} ${row.name}` : row.name }));

export const cellName = (view: SiteStructureView, cellId: string): string => {
  const cell = view.cells.find((one) => one.id === cellId);
  return cell ? `${cell.code} ${cell.name}` : '';
};
