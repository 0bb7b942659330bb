import { useState } from 'react';
import { ArrowRight, Table2 } from 'lucide-react';
import type { ReadTrackReply } from '#contract/scenarios.ts';
import { ApiError } from '../../../api/api-error.ts';
import { bytes } from '../../../lib/numbers.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { SelectField, TextArea } from '../../../ui/field.tsx';
import { FileDrop } from '../../../ui/file-drop.tsx';
import { Message } from '../../../ui/message.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { useReadTrack } from '../scenario-queries.ts';

type Way = 'paste' | 'file' | 'table';
const WAYS = [
  { value: 'paste', label: 'Paste text' },
  { value: 'file', label: 'Upload a file' },
  { value: 'table', label: 'Type a table' },
] as const;

const MAX_BYTES = 2_000_000;
const READABLE = /\.(txt|csv)$/i;
const SAMPLE = `AL092022,                IAN,     40,
20220928, 1200,  , HU, 26.0N,  82.7W, 140,  937,  …
20220928, 1800,  , HU, 26.6N,  82.3W, 135,  941,  …`;

/** What can be told of a file before it is read. */
const faultOf = (file: File): string | null => {
  if (!READABLE.test(file.name)) return `We read text: .txt or .csv. Save “${file.name}” as one of them.`;
  if (file.size > MAX_BYTES)
    return `This file is ${bytes(file.size)}; the limit is ${bytes(MAX_BYTES)}. Cut out the storm you need.`;
  return file.size === 0 ? 'This file is empty. Choose the one with the track.' : null;
};

interface TrackIntakeProps {
  onRead: (reply: ReadTrackReply, text: string) => void;
  onTable: () => void;
}

/** Three ways a track comes in; nothing is saved here. */
export function TrackIntake({ onRead, onTable }: TrackIntakeProps) {
  const [way, setWay] = useState<Way>('paste');
  const [text, setText] = useState('');
  const [file, setFile] = useState<File | null>(null);
  const [fault, setFault] = useState<string | null>(null);
  const [storms, setStorms] = useState<{ text: string; names: readonly string[]; chosen: string } | null>(null);
  const read = useReadTrack();

  const submit = async () => {
    read.reset();
    const fileFault = way === 'file' ? (file ? faultOf(file) : 'Choose the file first.') : null;
    setFault(fileFault ?? (way === 'paste' && text.trim() === '' ? 'Paste the track first.' : null));
    if (fileFault || (way === 'paste' && text.trim() === '')) return;
    const content = way === 'file' ? await file!.text() : text;
    const storm = storms?.text === content ? storms.chosen : undefined;
    read.mutate(
      { text: content, storm },
      {
        onSuccess: (reply) => {
          // Several storms in one text: the person says which, once.
          if (reply.storms.length > 1 && storm === undefined)
            setStorms({ text: content, names: reply.storms, chosen: reply.storms[0]! });
          else onRead(reply, content);
        },
      },
    );
  };

  return (
    <Card className="max-w-240">
      <Segmented
        label="How the track comes in"
        value={way}
        options={WAYS}
        onChange={(next) => {
          setWay(next);
          setFault(null);
          read.reset();
        }}
        size="medium"
        className="max-rail:w-full"
      />
      <div className="mt-4 flex flex-col gap-3">
        {way === 'paste' && (
          <TextArea
            label="Best-track text, or our track CSV"
            hint="Best-track text begins like AL092022, NAME, 40, and holds one line a fix. Our CSV has a header with time_utc, latitude and longitude; the unit is part of each column’s name."
            rows={12}
            spellCheck={false}
            placeholder={SAMPLE}
            value={text}
            error={fault ?? undefined}
            onChange={(event) => setText(event.target.value)}
          />
        )}
        {way === 'file' && (
          <FileDrop
            label="Track file"
            hint="Best-track text or our track CSV, as .txt or .csv, up to 2 MB. A file with several storms is fine: you choose one."
            accept=".txt,.csv,text/plain,text/csv"
            file={file}
            onFile={(next) => {
              setFile(next);
              setFault(next && faultOf(next));
              read.reset();
            }}
            error={fault && <Message tone="error">{fault}</Message>}
          />
        )}
        {way === 'table' && (
          <p className="max-w-160 text-ink-2">
            Start with an empty table: time, place and either a wind or a central pressure for each fix. What you leave
            open is filled, in brass, with the relation named.
          </p>
        )}
        {storms && way !== 'table' && (
          <SelectField
            label={`This text holds ${storms.names.length} storms`}
            value={storms.chosen}
            onChange={(event) => setStorms({ ...storms, chosen: event.target.value })}
            className="max-w-90"
          >
            {storms.names.map((name) => (
              <option key={name}>{name}</option>
            ))}
          </SelectField>
        )}
        {read.isError && (
          <Message tone="error" title="The track wasn’t read">
            <p>{read.error.message}</p>
            {read.error instanceof ApiError && read.error.faults.length > 0 && (
              <ul className="mt-1.5 max-h-48 list-disc overflow-y-auto pl-4">
                {read.error.faults.map((line) => (
                  <li key={`${line.path}${line.message}`}>{line.message}</li>
                ))}
              </ul>
            )}
          </Message>
        )}
        {way === 'table' ? (
          <Button variant="filled" icon={Table2} className="self-start" onClick={onTable}>
            Start a table
          </Button>
        ) : (
          <Button
            variant="filled"
            trailingIcon={ArrowRight}
            pending={read.isPending}
            className="self-start"
            onClick={() => void submit()}
          >
            Read the track
          </Button>
        )}
      </div>
    </Card>
  );
}
