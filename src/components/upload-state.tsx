import { Word } from './words.tsx';

interface UploadStateProps {
  upload: { confirmedAt: string | null; undoneAt: string | null; counts: { held: number } };
}

/** How an upload stands, in words. */
export function UploadState({ upload }: UploadStateProps) {
  if (upload.undoneAt) return <Word look="open">Undone</Word>;
  if (!upload.confirmedAt) return <Word look="ask">Not written yet</Word>;
  return upload.counts.held ? (
    <Word look="ask">{`Written, ${upload.counts.held} held`}</Word>
  ) : (
    <Word look="good">Written</Word>
  );
}
