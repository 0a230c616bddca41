/** The foot line: title, order, closing balance and fingerprint, always in sight. */
import { cancelWork, retryWork } from '../shared/pipeline';
import { proof } from '../shared/proof';
import { reading, sheet, solution, work } from '../shared/store';

/** Two groups of eight: enough to tell two sheets apart by eye. */
const FINGERPRINT_SHOWN = 17;

function orderInWords(): string {
  const read = reading.value;
  if (read === null) return '…';
  const { rows, cols, complex } = read.matrix;
  if (rows === 0) return 'none yet';
  const shape = rows === cols ? String(rows) : `${String(rows)} × ${String(cols)}`;
  return `${shape}, ${complex ? 'complex' : 'real'}${read.metric ? ', with metric' : ''}`;
}

function WorkState() {
  const now = work.value;
  switch (now.state) {
    case 'starting':
      return <span class="soft">loading the module…</span>;
    case 'busy':
      return (
        <>
          <label>
            <span class="soft">{now.stage} </span>
            <progress max={1} value={now.done} />
          </label>
          <button type="button" onClick={cancelWork}>
            Cancel
          </button>
        </>
      );
    case 'cancelled':
      return (
        <>
          <span>cancelled</span>
          <button type="button" onClick={retryWork}>
            Compute
          </button>
        </>
      );
    case 'failed':
      return (
        <>
          <span title={now.reason}>stopped</span>
          <button type="button" onClick={retryWork}>
            Try again
          </button>
        </>
      );
    case 'idle':
      return null;
  }
}

export function FootLine() {
  const solved = solution.value;
  return (
    <footer class="foot-line">
      <dl>
        <div class="title">
          <dt class="unseen">Title</dt>
          <dd>{sheet.value.value.title || 'Untitled'}</dd>
        </div>
        <div>
          <dt>order</dt>
          <dd>{orderInWords()}</dd>
        </div>
        <div>
          <dt>closing balance</dt>
          <dd class="digits">{(solved && (proof.value?.closing ?? solved.closingBalance)) ?? '—'}</dd>
        </div>
        <div>
          <dt>fingerprint</dt>
          <dd class="digits" title={solved?.fingerprint}>
            {solved?.fingerprint.slice(0, FINGERPRINT_SHOWN) ?? '—'}
          </dd>
        </div>
      </dl>
      <div class="work">
        <WorkState />
      </div>
    </footer>
  );
}
