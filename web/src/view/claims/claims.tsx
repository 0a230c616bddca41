/** The Claims section: stated numbers and their verdicts, a claim a line. */
import { useRef, useState } from 'preact/hooks';

import type { Item, Line, Verdict } from '../../shared/generated/eigenledger';
import { claimFiles } from '../../shared/claims';
import { figuresKey } from '../../shared/proof';
import { changeDocument, latestSolution, sheet, solution } from '../../shared/store';
import { callback } from '../../shared/worker';
import { Figure, type Mark } from '../parts/margin';
import { useRemote } from '../parts/remote';
import { ClaimPicture } from './picture';

const HINT = `eigenvalues: 1.381, 3.618
vector for 3.618: 1.000 1.618
trace: 7`;

const FREEDOMS: Record<Verdict['freedoms'][number], string> = {
  scale: 'scale of a vector',
  phase: 'sign or phase of a vector',
  basis: 'basis within a repeated eigenvalue’s space',
  offDiagonalSigns: 'signs of the off-diagonals',
  order: 'order of the values',
  polynomialSign: 'sign of the polynomial',
  reflectorSign: 'the other sign of a reflector',
  columnSigns: 'signs of the columns',
  restart: 'the vector a split form restarts from',
};

function Items({ items }: { items: readonly Item[] }) {
  if (items.length === 0) return null;
  return (
    <details class="claim-items" open={items.length <= 8}>
      <summary>stated beside true</summary>
      <div class="scroll-figures" tabIndex={0}>
        <table>
          <thead>
            <tr>
              <th scope="col">what</th>
              <th scope="col">stated</th>
              <th scope="col">true</th>
              <th scope="col">verdict</th>
            </tr>
          </thead>
          <tbody>
            {items.map((item, place) => (
              <tr key={place} class={item.word}>
                <th scope="row">{item.label}</th>
                <td class="digits">{item.claimed || '—'}</td>
                <td class="digits">{item.truth}</td>
                <td>
                  {item.word}
                  {item.offBy !== undefined && <span class="soft"> by {item.offBy}</span>}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  );
}

function Judged({ verdict }: { verdict: Verdict }) {
  return (
    <>
      <p class="sentence">
        <strong>{verdict.word}</strong>: {verdict.sentence}
        {verdict.number !== undefined && (
          <span class="soft">
            {' '}
            {verdict.number.name} <span class="digits">{verdict.number.value}</span>
          </span>
        )}
      </p>
      {verdict.freedoms.length > 0 && (
        <p class="soft">granted: {verdict.freedoms.map((freedom) => FREEDOMS[freedom]).join(', ')}</p>
      )}
      {verdict.findings.length > 0 && (
        <ul class="claim-findings">
          {verdict.findings.map((finding, place) => (
            <li key={place}>{finding.text}</li>
          ))}
        </ul>
      )}
      <ClaimPicture items={verdict.items} />
      <Items items={verdict.items} />
    </>
  );
}

function Claim({ line, first }: { line: Line; first: boolean }) {
  const { verdict } = line;
  const mark: Mark = verdict?.word ?? 'plain';
  const reason = verdict?.sentence ?? line.error ?? '';
  return (
    <Figure mark={mark} reason={reason} label={`claim: ${line.text}`}>
      <div class="claim">
        {first && <p class="first-wrong">Here it first goes wrong.</p>}
        <pre class="digits">{line.text}</pre>
        {verdict === undefined ? <p class="sentence">{line.error}</p> : <Judged verdict={verdict} />}
      </div>
    </Figure>
  );
}

function FilePicker() {
  const picker = useRef<HTMLInputElement>(null);
  return (
    <>
      <button type="button" disabled={solution.value === null} onClick={() => picker.current?.click()}>
        Claim output files…
      </button>
      <input
        ref={picker}
        type="file"
        multiple
        hidden
        aria-label="Another program’s output files"
        onChange={(event) => {
          const files = [...(event.currentTarget.files ?? [])];
          event.currentTarget.value = '';
          if (files.length > 0) void claimFiles(files);
        }}
      />
    </>
  );
}

function Editor() {
  const kept = (sheet.value.value.claims ?? []).join('\n');
  const [draft, setDraft] = useState<string | null>(null);
  const text = draft ?? kept;
  return (
    <form
      class="claims-editor screen-only"
      onSubmit={(event) => {
        event.preventDefault();
        changeDocument({ claims: text.trim() === '' ? [] : [text] });
        setDraft(null);
      }}
    >
      <label for="claims-text">Numbers someone hands over, each after the words that say what it is</label>
      <textarea
        id="claims-text"
        class="digits"
        rows={Math.min(16, Math.max(3, text.split('\n').length + 1))}
        placeholder={HINT}
        spellcheck={false}
        value={text}
        onInput={(event) => { setDraft(event.currentTarget.value); }}
      />
      <p class="row">
        <button type="submit" class={draft === null ? '' : 'primary'} disabled={draft === null || draft === kept}>
          Judge
        </button>
        <FilePicker />
        <span class="soft">
          eigenvalue, eigenvalues, vector for …, tridiagonal, reflector …, matrix … (after so many steps), cholesky,
          polynomial, determinant, trace, condition number and others; another program’s values and vectors may be
          dropped here as CSV, JSON, .npy or Matrix Market files
        </span>
      </p>
    </form>
  );
}

export function Claims() {
  const claims = sheet.value.value.claims ?? [];
  const solved = latestSolution.value;
  const key = figuresKey.value;
  const judgement = useRemote(
    key === null || claims.length === 0 ? null : `${key} ${claims.join('\n')}`,
    (bench) => bench.judge([...claims], callback(() => undefined)),
  );
  return (
    <>
      <Editor />
      {solved !== null &&
        claims.length > 0 &&
        judgement?.lines.map((line, place) => (
          <Claim key={place} line={line} first={judgement.firstWrong === place} />
        ))}
    </>
  );
}
