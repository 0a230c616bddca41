/** The Problem section: what is to be solved, as typed. */
import { computed } from '@preact/signals';
import { useCallback } from 'preact/hooks';

import type { Adjustment } from '../../shared/generated/eigenledger';
import { isUntouchedExample, replaceExample } from '../../shared/examples';
import { changeDocument, latestReading, reading, sheet } from '../../shared/store';
import { Parameters } from './parameters';
import { TextPart } from './text-part';
import { Tools } from './tools';

const MATRIX_HINT = 'Type or paste a matrix: a row a line, cells apart by spaces, tabs, commas or semicolons';
const METRIC_HINT = 'Type or paste the metric (mass or overlap); one row stands for a diagonal';

const matrixText = computed(() => sheet.value.value.matrix);
const metricText = computed(() => sheet.value.value.metric ?? '');

/** The example of a first visit gives way to the first paste, whole. */
function pasteReplaces(text: string): boolean {
  if (!isUntouchedExample()) return false;
  replaceExample(text);
  return true;
}

function changeMatrix(matrix: string): void {
  if (matrix !== sheet.value.value.matrix) changeDocument({ matrix });
}

function changeMetric(metric: string): void {
  // An editor emptied because the metric was taken away must not bring one back.
  if (metric !== (sheet.value.value.metric ?? '')) changeDocument({ metric });
}

function choose(change: Partial<(typeof sheet.value.value)['choices']>): void {
  changeDocument({ choices: { ...sheet.value.value.choices, ...change } });
}

function Heading() {
  const { title, notes } = sheet.value.value;
  return (
    <div class="problem-heading">
      <input
        class="title-field"
        value={title}
        placeholder="Title"
        aria-label="Title"
        onInput={(event) => { changeDocument({ title: event.currentTarget.value }); }}
      />
      <textarea
        class="notes-field"
        rows={Math.min(8, Math.max(1, Math.ceil(notes.length / 110), notes.split('\n').length))}
        value={notes}
        placeholder="Notes: where the matrix comes from, its units, what is asked of it"
        aria-label="Notes"
        onInput={(event) => { changeDocument({ notes: event.currentTarget.value }); }}
      />
    </div>
  );
}

export function Problem() {
  const { metric, parameters } = sheet.value.value;
  const shown = latestReading.value?.value;
  const current = reading.value !== null;
  const neverReplaces = useCallback(() => false, []);
  return (
    <>
      <Tools />
      <Heading />
      <TextPart
        which="matrix"
        label="The matrix"
        hint={MATRIX_HINT}
        text={matrixText}
        reading={shown?.matrix}
        current={current}
        onText={changeMatrix}
        onPaste={pasteReplaces}
        onAnswer={(matrixLayout) => { choose({ matrixLayout }); }}
        onAdjust={(matrixAdjustment?: Adjustment) => { choose({ matrixAdjustment }); }}
      />
      {metric === undefined ? (
        <p class="screen-only">
          <button type="button" class="quiet" onClick={() => { changeDocument({ metric: '' }); }}>
            add a metric
          </button>
          <span class="soft">for A x = λ M x, with M a mass or overlap matrix</span>
        </p>
      ) : (
        <div class="metric">
          <div class="row">
            <h3>Metric</h3>
            <button
              type="button"
              class="quiet screen-only"
              onClick={() => { changeDocument({ metric: undefined }); }}
            >
              remove the metric
            </button>
          </div>
          <TextPart
            which="metric"
            label="The metric"
            hint={METRIC_HINT}
            text={metricText}
            reading={shown?.metric}
            current={current}
            onText={changeMetric}
            onPaste={neverReplaces}
            onAnswer={(metricLayout) => { choose({ metricLayout }); }}
            onAdjust={(metricAdjustment?: Adjustment) => { choose({ metricAdjustment }); }}
          />
        </div>
      )}
      <Parameters list={parameters} diagnostics={shown?.parameters ?? []} />
      <p class="caution">
        Where structures, machines or people depend on a figure, local codes and licensed practice come first: this
        sheet vouches for the arithmetic, not for the model.
      </p>
    </>
  );
}
