import { useRef, useState } from 'react';
import { ArrowRight } from 'lucide-react';
import type { Edition, Portfolio } from '#contract/portfolios.ts';
import { newIdempotencyKey } from '../../../api/idempotency-key.ts';
import { bytes } from '../../../lib/numbers.ts';
import { Button } from '../../../ui/button.tsx';
import { Dialog } from '../../../ui/dialog.tsx';
import { SelectField, TextField } from '../../../ui/field.tsx';
import { FileDrop } from '../../../ui/file-drop.tsx';
import { Message } from '../../../ui/message.tsx';
import { CURRENCIES } from '../currencies.ts';
import { useCreatePortfolio, useUploadFile } from '../portfolio-queries.ts';

interface UploadDialogProps {
  open: boolean;
  onClose: () => void;
  /** Given when the file becomes the next edition of a portfolio that exists. */
  portfolio?: Portfolio;
  onUploaded: (edition: Edition) => void;
}

const MAX_BYTES = 50_000_000;
const READABLE = /\.(csv|tsv|txt)$/i;

/** What can be told before anything is sent. */
const faultOf = (file: File): string | null => {
  if (file.size > MAX_BYTES)
    return `This file is ${bytes(file.size)}. The limit is ${bytes(MAX_BYTES)}. Split it by region or remove columns you don’t need, then upload the parts.`;
  if (file.size === 0) return 'This file is empty. Choose the schedule as the broker sent it.';
  if (!READABLE.test(file.name))
    return `We read text files: CSV, TSV, semicolon or pipe separated. Save “${file.name}” as CSV and upload it again.`;
  return null;
};

const isAbort = (error: unknown) => error instanceof DOMException && error.name === 'AbortError';
const nameFrom = (file: File) =>
  file.name
    .replace(/\.[^.]+$/, '')
    .replaceAll(/[_-]+/g, ' ')
    .trim();

export function UploadDialog({ open, onClose, portfolio, onUploaded }: UploadDialogProps) {
  const create = useCreatePortfolio();
  const send = useUploadFile();
  const [file, setFile] = useState<File | null>(null);
  const [name, setName] = useState('');
  const [currency, setCurrency] = useState('USD');
  const [progress, setProgress] = useState<{ sent: number; total: number } | null>(null);
  const [asked, setAsked] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);
  /** A portfolio made before its upload failed is used again by the next try. */
  const made = useRef<{ portfolio: Portfolio; name: string } | null>(null);
  const key = useRef(newIdempotencyKey());
  const stop = useRef<AbortController | null>(null);
  const fileFault = file && faultOf(file);
  const nameFault =
    !portfolio && name.trim() === '' ? 'Give the portfolio a name, for example the account reference.' : undefined;
  const busy = create.isPending || send.isPending;

  const submit = async () => {
    setAsked(true);
    setFailure(null);
    if (!file || fileFault || nameFault || busy) return;
    try {
      if (!portfolio && made.current?.name !== name.trim()) {
        if (made.current) key.current = newIdempotencyKey();
        made.current = {
          portfolio: await create.mutateAsync({ body: { name: name.trim(), currency }, key: key.current }),
          name: name.trim(),
        };
      }
      const target = portfolio ?? made.current!.portfolio;
      stop.current = new AbortController();
      setProgress({ sent: 0, total: file.size });
      const edition = await send.mutateAsync({
        portfolio: target,
        file,
        onProgress: (sent, total) => setProgress({ sent, total }),
        signal: stop.current.signal,
      });
      onUploaded(edition);
    } catch (error) {
      if (!isAbort(error)) setFailure(error instanceof Error ? error.message : String(error));
    } finally {
      setProgress(null);
    }
  };

  return (
    <Dialog
      open={open}
      onClose={() => {
        if (!busy) onClose();
      }}
      title={portfolio ? `Upload the next edition of ${portfolio.name}` : 'Upload a schedule'}
      actions={
        <>
          <Button variant="quiet" onClick={busy ? () => stop.current?.abort() : onClose}>
            {busy ? 'Stop' : 'Not now'}
          </Button>
          <Button variant="filled" trailingIcon={ArrowRight} pending={busy} onClick={() => void submit()}>
            Upload and read
          </Button>
        </>
      }
    >
      <p className="mb-3.5 text-13 text-ink-2">
        Nothing is loaded until you have said which column is which. Please leave names of people out of the file.
      </p>
      <FileDrop
        label="Schedule"
        hint="CSV, TSV, semicolon or pipe separated text; up to 50 MB, 250,000 rows and 200 columns."
        accept=".csv,.tsv,.txt,text/csv"
        file={file}
        progress={progress}
        onCancel={() => stop.current?.abort()}
        onFile={(chosen) => {
          setFile(chosen);
          setFailure(null);
          if (chosen && name === '' && !portfolio) setName(nameFrom(chosen));
        }}
        error={
          (fileFault ?? failure) ? (
            <Message tone="error">{fileFault ?? failure}</Message>
          ) : asked && !file ? (
            <Message tone="error">Choose the file first.</Message>
          ) : undefined
        }
      />
      {!portfolio && (
        <div className="mt-4 grid grid-cols-[minmax(0,1fr)_112px] gap-3">
          <TextField
            label="Portfolio name"
            value={name}
            readOnly={busy}
            error={asked ? nameFault : undefined}
            onChange={(event) => setName(event.target.value)}
          />
          <SelectField label="Currency" value={currency} onChange={(event) => setCurrency(event.target.value)}>
            {CURRENCIES.map((code) => (
              <option key={code}>{code}</option>
            ))}
          </SelectField>
        </div>
      )}
    </Dialog>
  );
}
