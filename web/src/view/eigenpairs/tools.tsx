/** Digits to show, copying, and files. */
import type { ExportKind } from '../../shared/generated/eigenledger';
import { copyText, saveFile } from '../../shared/files';
import { digits, notice, reportTrouble, sheet } from '../../shared/store';
import { withWorkbench } from '../../shared/worker';
import { useState } from 'preact/hooks';

const CHOICES: readonly (readonly [string, string])[] = [
  ['proven', 'all that are proven'],
  ['4', 'at most 4'],
  ['6', 'at most 6'],
  ['8', 'at most 8'],
  ['10', 'at most 10'],
  ['12', 'at most 12'],
  ['16', 'at most 16'],
  ['24', 'at most 24'],
];

const KINDS: readonly (readonly [ExportKind, string])[] = [
  ['values-csv', 'values, CSV'],
  ['vectors-csv', 'vectors, CSV'],
  ['tridiagonal-csv', 'tridiagonal form, CSV'],
  ['json', 'everything, JSON'],
  ['values-matrix-market', 'values, Matrix Market'],
  ['vectors-matrix-market', 'vectors, Matrix Market'],
  ['tridiagonal-matrix-market', 'tridiagonal form, Matrix Market'],
];

function isKind(value: string): value is ExportKind {
  return KINDS.some(([kind]) => kind === value);
}

async function handOver(kind: ExportKind, way: 'copy' | 'download'): Promise<void> {
  try {
    const file = await withWorkbench(async (bench) => {
      await bench.take_heading(sheet.value.value);
      return bench.export_results(kind);
    });
    if (file === undefined) return;
    if (way === 'download') {
      saveFile(file.name, file.mediaType, file.text);
    } else if (await copyText(file.text)) {
      notice.value = { tone: 'information', text: 'Copied.' };
    } else {
      notice.value = { tone: 'trouble', text: 'The browser did not allow the copy; download the file instead.' };
    }
  } catch (reason) {
    reportTrouble(reason);
  }
}

export function Tools({ settled }: { settled: boolean }) {
  const [kind, setKind] = useState<ExportKind>('values-csv');
  return (
    <div class="tools screen-only">
      <label>
        digits{' '}
        <select
          value={String(digits.value)}
          onChange={(event) => {
            const { value } = event.currentTarget;
            digits.value = value === 'proven' ? 'proven' : Number(value);
          }}
        >
          {CHOICES.map(([value, words]) => (
            <option key={value} value={value}>
              {words}
            </option>
          ))}
        </select>
      </label>
      <label>
        take away{' '}
        <select
          value={kind}
          onChange={(event) => {
            const { value } = event.currentTarget;
            if (isKind(value)) setKind(value);
          }}
        >
          {KINDS.map(([value, words]) => (
            <option key={value} value={value}>
              {words}
            </option>
          ))}
        </select>
      </label>
      <button type="button" disabled={!settled} onClick={() => void handOver(kind, 'copy')}>
        Copy
      </button>
      <button type="button" disabled={!settled} onClick={() => void handOver(kind, 'download')}>
        Download
      </button>
    </div>
  );
}
