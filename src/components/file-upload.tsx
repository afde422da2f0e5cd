import { useQueryClient } from '@tanstack/react-query';
import { useId, useState } from 'react';
import { api, ApiProblem } from '../lib/api-client.ts';
import { newId } from '../lib/new-id.ts';

interface FileUploadProps {
  siteId: string;
  path: string;
  label: string;
  hint: string;
  /** Fields that go with the file; null while one is still missing, with what to say. */
  fields: () => { values: Record<string, string> } | { missing: string };
  onDone: (answer: { id: string }) => void;
}

const bytesMax = 10 * 1024 * 1024;

/** A file chosen by button, sent, and its check page opened. What went wrong is said in one sentence; the choice stays. */
export function FileUpload({ siteId, path, label, hint, fields, onDone }: FileUploadProps) {
  const client = useQueryClient();
  const [problem, setProblem] = useState<string | null>(null);
  const [isSending, setIsSending] = useState(false);
  const [file, setFile] = useState<File | null>(null);
  const id = useId();
  const handleSend = async () => {
    const ready = fields();
    if ('missing' in ready) return setProblem(ready.missing);
    if (!file) return setProblem('Choose a file first.');
    if (file.size === 0) return setProblem(`${file.name} is empty.`);
    if (file.size > bytesMax)
      return setProblem(`${file.name} is larger than 10 MB. Split it, or save it without pictures.`);
    setProblem(null);
    setIsSending(true);
    try {
      const answer = await api.upload<{ id: string }>(
        `/sites/${siteId}${path}`,
        { id: newId(), ...ready.values },
        file,
      );
      await client.invalidateQueries({ queryKey: ['site', siteId] });
      onDone(answer);
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      setProblem(error.document.errors?.map((one) => one.detail).join(' ') || error.document.detail);
    } finally {
      setIsSending(false);
    }
  };
  return (
    <div className="grid gap-3">
      <div>
        <label className="label" htmlFor={id}>
          {label}
        </label>
        <p className="hint mb-1" id={`${id}-hint`}>
          {hint}
        </p>
        <input
          id={id}
          type="file"
          accept=".xlsx,.csv,.txt"
          className="input"
          aria-describedby={`${id}-hint`}
          onChange={(event) => setFile(event.target.files?.[0] ?? null)}
        />
      </div>
      {problem && (
        <p role="alert" className="error-text">
          ⚠ {problem}
        </p>
      )}
      <p>
        <button type="button" className="btn" disabled={isSending} onClick={() => void handleSend()}>
          {isSending ? 'Reading the file …' : 'Read the file'}
        </button>
      </p>
    </div>
  );
}
