import { useId, useState, type ReactNode } from 'react';
import { Download, Table2 } from 'lucide-react';
import { NOTICE_VERSION } from '#contract/notices.ts';
import { classNames } from '../../lib/class-names.ts';

export interface ChartTable {
  columns: readonly string[];
  /** First column names the row; the others are figures. */
  rows: readonly (readonly string[])[];
}

interface ChartFrameProps {
  title: ReactNode;
  /** Unit, definition, legend: small text beside the title. */
  aside?: ReactNode;
  /** One sentence that says what the picture shows. */
  summary: string;
  table: ChartTable;
  /** Name of the downloaded table, without its extension. */
  fileName: string;
  children: ReactNode;
  className?: string;
  /** The picture has controls of its own: it isn’t one image. */
  interactive?: boolean;
}

const quoted = (text: string) => (/[",\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);
/** The table with the version of the cautions it was made under in each row: a file travels without its screen. */
const csvOf = ({ columns, rows }: ChartTable): string =>
  [[...columns, 'notice_version'], ...rows.map((row) => [...row, NOTICE_VERSION])]
    .map((row) => row.map(quoted).join(','))
    .join('\r\n');

/** Hands a text over as a file. */
export const saveText = (name: string, text: string, type: string): void => {
  const url = URL.createObjectURL(new Blob([text], { type }));
  const link = document.createElement('a');
  link.href = url;
  link.download = name;
  link.click();
  URL.revokeObjectURL(url);
};

const TOOL =
  'flex h-7 items-center gap-1.25 rounded-1 px-1.5 text-12 font-bold text-link hover:bg-hover aria-pressed:bg-selected pointer-coarse:h-11';

/** Title, picture with its text alternative, the same as a table, and the table as a file. */
export function ChartFrame({
  title,
  aside,
  summary,
  table,
  fileName,
  children,
  className,
  interactive = false,
}: ChartFrameProps) {
  const [asTable, setAsTable] = useState(false);
  const titleId = useId();
  return (
    <section aria-labelledby={titleId} className={classNames('min-w-0', className)}>
      <header className="flex flex-wrap items-center gap-x-2.5 gap-y-0.5">
        <h3 id={titleId} className="text-15">
          {title}
        </h3>
        {aside && <div className="text-12 text-ink-2">{aside}</div>}
        <div className="ml-auto flex" data-print="hide">
          <button type="button" className={TOOL} aria-pressed={asTable} onClick={() => setAsTable(!asTable)}>
            <Table2 size={14} strokeWidth={1.75} aria-hidden />
            Table
          </button>
          <button
            type="button"
            className={TOOL}
            onClick={() => saveText(`${fileName}.csv`, csvOf(table), 'text/csv;charset=utf-8')}
          >
            <Download size={14} strokeWidth={1.75} aria-hidden />
            Download
          </button>
        </div>
      </header>
      {asTable ? (
        <FigureTable table={table} label={summary} />
      ) : (
        <div role={interactive ? undefined : 'img'} aria-label={interactive ? undefined : summary}>
          {children}
        </div>
      )}
    </section>
  );
}

function FigureTable({ table, label }: { table: ChartTable; label: string }) {
  return (
    <div
      className="mt-2 max-h-80 overflow-auto rounded-2 border border-rule"
      tabIndex={0}
      role="region"
      aria-label={label}
    >
      <table className="w-full border-collapse text-13">
        <thead className="sticky top-0 bg-panel-2 text-12 text-ink-2">
          <tr>
            {table.columns.map((column, index) => (
              <th
                key={column}
                scope="col"
                className={classNames('px-2.5 py-1.5 font-normal', index === 0 ? 'text-left' : 'text-right')}
              >
                {column}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {table.rows.map((row, rowIndex) => (
            <tr key={rowIndex} className="border-t border-rule">
              {row.map((cell, index) =>
                index === 0 ? (
                  <th key={index} scope="row" className="px-2.5 py-1 text-left font-normal whitespace-nowrap">
                    {cell}
                  </th>
                ) : (
                  <td key={index} className="px-2.5 py-1 text-right">
                    {cell}
                  </td>
                ),
              )}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
