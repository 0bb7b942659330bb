import { useId, useRef, useState, type ReactNode } from 'react';
import { CloudUpload, FileText, X } from 'lucide-react';
import { bytes } from '../lib/numbers.ts';
import { classNames } from '../lib/class-names.ts';
import { Button, IconButton } from './button.tsx';
import { ProgressBar } from './progress-bar.tsx';

interface FileDropProps {
  label: string;
  /** Formats and limits in words. */
  hint: ReactNode;
  accept: string;
  file: File | null;
  onFile: (file: File | null) => void;
  /** While it is being sent. */
  progress?: { sent: number; total: number } | null;
  onCancel?: () => void;
  error?: ReactNode;
  className?: string;
}

/** Drop a file or choose one; shows what was chosen, then bytes sent with a way to stop. */
export function FileDrop({ label, hint, accept, file, onFile, progress, onCancel, error, className }: FileDropProps) {
  const input = useRef<HTMLInputElement>(null);
  const [over, setOver] = useState(false);
  const hintId = useId();
  return (
    <div className={className}>
      <div
        onDragOver={(event) => {
          event.preventDefault();
          setOver(true);
        }}
        onDragLeave={() => setOver(false)}
        onDrop={(event) => {
          event.preventDefault();
          setOver(false);
          const dropped = event.dataTransfer.files[0];
          if (dropped && !progress) onFile(dropped);
        }}
        className={classNames(
          'rounded-2 border border-dashed px-4 py-4 transition-colors duration-(--quick)',
          over ? 'border-action bg-selected' : error ? 'border-error bg-sheet' : 'border-edge bg-well',
        )}
      >
        <input
          ref={input}
          type="file"
          accept={accept}
          className="sr-only"
          tabIndex={-1}
          aria-label={label}
          onChange={(event) => {
            onFile(event.target.files?.[0] ?? null);
            event.target.value = '';
          }}
        />
        {file ? (
          <div className="flex items-center gap-3">
            <FileText size={22} strokeWidth={1.5} className="flex-none text-action" aria-hidden />
            <div className="min-w-0 flex-1">
              <b className="block truncate">{file.name}</b>
              <span className="text-13 text-ink-2" aria-live="polite">
                {progress ? `${bytes(progress.sent)} of ${bytes(progress.total)} sent` : bytes(file.size)}
              </span>
              {progress && (
                <ProgressBar
                  label={`Sending ${file.name}`}
                  done={progress.sent}
                  total={progress.total}
                  className="mt-1.5"
                />
              )}
            </div>
            {progress ? (
              onCancel && (
                <Button size="small" onClick={onCancel}>
                  Cancel
                </Button>
              )
            ) : (
              <IconButton label="Choose another file" icon={X} onClick={() => onFile(null)} />
            )}
          </div>
        ) : (
          <div className="flex flex-col items-center gap-2 py-2 text-center">
            <CloudUpload size={28} strokeWidth={1.5} className="text-action" aria-hidden />
            <p>
              <button
                type="button"
                aria-describedby={hintId}
                className="rounded-1 font-bold text-link underline underline-offset-2"
                onClick={() => input.current?.click()}
              >
                Choose a file
              </button>{' '}
              or drop it here
            </p>
            <p id={hintId} className="max-w-90 text-13 text-ink-2">
              {hint}
            </p>
          </div>
        )}
      </div>
      {error && <div className="mt-2">{error}</div>}
    </div>
  );
}
