import { useState } from 'react';
import { laboratoryInput, samplePointInput, type SamplePointInput } from '#shared/schemas/lab.ts';
import type { LabView } from '#shared/views/lab-view.ts';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { Section } from '../../components/page.tsx';
import { newId } from '../../lib/new-id.ts';
import { useRecord, useWrite } from '../../lib/record.ts';

const pointKinds = [
  ['raw-leachate', 'raw leachate'],
  ['leak-detection', 'leak detection'],
  ['influent', 'influent of the plant'],
  ['effluent', 'effluent'],
  ['storm-water', 'storm water'],
  ['groundwater', 'groundwater'],
] as const;

/** Laboratories and sample points of the site, each with a form to add one. */
export function LabSetup({ view }: { view: LabView }) {
  const { site } = usePlace();
  const structure = useRecord<SiteStructureView>(site.id, '');
  const [open, setOpen] = useState<'laboratory' | 'point' | null>(null);
  const saveLaboratory = useWrite<{ id: string; name: string }>(site.id, '/laboratories');
  const savePoint = useWrite<SamplePointInput>(site.id, '/sample-points');
  const close = () => setOpen(null);
  return (
    <div className="no-print mt-8">
      <Section title="Laboratories and sample points">
        <div className="sheet pad grid gap-3">
          <p>
            <strong>Laboratories:</strong> {view.laboratories.map((one) => one.name).join(', ') || 'none yet'}
            .{' '}
            <button type="button" className="link" onClick={() => setOpen('laboratory')}>
              Add a laboratory
            </button>
          </p>
          <p>
            <strong>Sample points:</strong>{' '}
            {view.points.map((one) => `${one.code} ${one.name}`).join(', ') || 'none yet'}.{' '}
            <button type="button" className="link" onClick={() => setOpen('point')}>
              Add a sample point
            </button>
          </p>
        </div>
      </Section>
      <Panel title="Add a laboratory" isOpen={open === 'laboratory'} onClose={close}>
        <RecordForm<{ id: string; name: string }>
          schema={laboratoryInput}
          defaults={{ id: newId(), name: '' }}
          submitLabel="Add the laboratory"
          onSubmit={(values) => saveLaboratory.mutateAsync(values)}
          onDone={close}
        >
          <TextField name="name" label="Name of the laboratory" />
        </RecordForm>
      </Panel>
      <Panel title="Add a sample point" isOpen={open === 'point'} onClose={close}>
        <RecordForm<SamplePointInput>
          schema={samplePointInput}
          defaults={{ id: newId(), code: '', name: '' }}
          submitLabel="Add the sample point"
          onSubmit={(values) => savePoint.mutateAsync(values)}
          onDone={close}
        >
          <TextField name="code" label="Code, as on the bottle" />
          <TextField name="name" label="Name" />
          <ChoiceField
            name="kind"
            label="What is sampled"
            options={pointKinds.map(([value, label]) => ({ value, label }))}
          />
          <ChoiceField
            name="placeId"
            label="Place in the ledger"
            isOptional
            options={(structure.data?.places ?? []).map((place) => ({ value: place.id, label: place.name }))}
          />
        </RecordForm>
      </Panel>
    </div>
  );
}
