import { useState, type ReactNode } from 'react';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { Panel } from '../../components/dialog.tsx';
import { ChoiceField, TextField } from '../../components/form.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';

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

/** What a site is known by; asked when it is made, and changeable afterwards. */
export function SiteFactFields() {
  return (
    <>
      <TextField name="name" label="Name of the site" />
      <TextField
        name="latitudeDeg"
        label="Latitude in degrees, south negative"
        unit="°"
        hint="It decides the daylight of each month. Like 52.41."
      />
      <TextField name="elevationM" label="Height above the sea, in metres" unit="m" />
      <TextField
        name="openedOn"
        label="Day the record begins"
        hint="Like 2024-01-01; not after the first cell opened."
      />
      <ChoiceField
        name="displayUnits"
        label="Units shown"
        options={[
          { value: 'metric', label: 'metric: m³, mm, ha' },
          { value: 'us', label: 'US: gallons, inches, acres' },
        ]}
      />
    </>
  );
}

export const m2 = (text: string) => formatNumber(Number(text), 0);

export const optionsOf = (rows: readonly { id: string; name: string; code?: string }[]) =>
  rows.map((row) => ({ value: row.id, label: row.code ? `${row.code} ${row.name}` : row.name }));

export const cellName = (view: SiteStructureView, cellId: string): string => {
  const cell = view.cells.find((one) => one.id === cellId);
  return cell ? `${cell.code} ${cell.name}` : '';
};
