/** One matrix on the page: its text or grid, its map, and what was found in it. */
import { signal, type ReadonlySignal } from '@preact/signals';
import { useMemo, useRef } from 'preact/hooks';

import type { Adjustment, GridEdit, Repair, TextChange, TextReading, Which } from '../../shared/generated/eigenledger';
import { reportTrouble, sheet } from '../../shared/store';
import { withWorkbench } from '../../shared/worker';
import { MatrixMap } from '../parts/matrix-map';
import { Editor, type EditorHandle } from './editor';
import { Findings } from './findings';
import { Grid } from './grid';

interface TextPartProps {
  readonly which: Which;
  readonly label: string;
  readonly hint: string;
  readonly text: ReadonlySignal<string>;
  /** The latest reading of this text, current or not. */
  readonly reading: TextReading | undefined;
  /** Whether it is of the text as it stands. */
  readonly current: boolean;
  readonly onText: (text: string) => void;
  readonly onPaste: (text: string) => boolean;
  readonly onAnswer: (key: string | undefined) => void;
  readonly onAdjust: (choice: Adjustment | undefined) => void;
}

type Face = 'text' | 'grid';

export function TextPart(props: TextPartProps) {
  const { which, label, reading, current } = props;
  const face = useMemo(() => signal<Face>('text'), []);
  const editor = useRef<EditorHandle | null>(null);

  const change = ({ from, to, insert, layout }: TextChange) => {
    editor.current?.change({ from, to, insert });
    if (layout !== undefined && reading?.answered === true) props.onAnswer(layout);
  };
  const repair = ({ key }: Repair) => {
    withWorkbench((bench) => bench.apply_repair(sheet.value.value, which, key)).then(change, reportTrouble);
  };
  const edit = (made: GridEdit) => {
    withWorkbench((bench) => bench.edit_grid(sheet.value.value, which, made)).then(change, reportTrouble);
  };
  const show = (from: number, to: number) => {
    face.value = 'text';
    // The editor has to be on the page before it can take the keyboard.
    requestAnimationFrame(() => { editor.current?.show(from, to); });
  };

  return (
    <div class="text-part">
      <div class="faces">
        <div role="group" aria-label={`${label}: how to edit it`} class="row screen-only">
          {(['text', 'grid'] as const).map((name) => (
            <button
              key={name}
              type="button"
              aria-pressed={face.value === name}
              onClick={() => { face.value = name; }}
            >
              {name === 'text' ? 'as text' : 'cell by cell'}
            </button>
          ))}
        </div>
        <div hidden={face.value !== 'text'}>
          <Editor
            label={label}
            text={props.text}
            hint={props.hint}
            diagnostics={current ? reading?.diagnostics : undefined}
            onText={props.onText}
            onPaste={props.onPaste}
            onRepair={repair}
            onReady={(handle) => { editor.current = handle; }}
          />
        </div>
        {face.value === 'grid' && reading && (
          <Grid
            reading={reading}
            label={`${label}, cell by cell`}
            onEdit={edit}
            onUndo={() => { editor.current?.undo(); }}
            onRedo={() => { editor.current?.redo(); }}
          />
        )}
        {reading && (
          <Findings
            reading={reading}
            onShow={show}
            onRepair={repair}
            onAnswer={props.onAnswer}
            onAdjust={props.onAdjust}
          />
        )}
      </div>
      {reading?.map && <MatrixMap map={reading.map} title={label} complex={reading.complex} />}
    </div>
  );
}
