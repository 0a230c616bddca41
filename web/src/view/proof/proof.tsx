/** The Proof section: what is proven, on which conditions, and what is not. */
import { cancelProof, proof, proving, requestProof } from '../../shared/proof';
import { chosenEigenvalue, latestSolution, solution } from '../../shared/store';
import type { ConditionView, ProofView } from '../../shared/generated/eigenledger';
import { useState } from 'preact/hooks';
import { Figure } from '../parts/margin';
import { SpectrumLine } from '../spectrum/line';
import { Certificate } from './certificate';
import { ExactRoad } from './exact';
import { Tolerances } from './tolerances';

const DIGITS_AT_FIRST = 50;
const MOST_DIGITS = 1000;

function Condition({ condition }: { condition: ConditionView }) {
  return (
    <Figure mark={condition.standing} reason={condition.sentence} label={condition.symbol}>
      <p class="condition">
        <span class="symbol">{condition.symbol}</span>
        {condition.bound !== undefined && <span class="digits bound">{condition.bound}</span>}
        <span class="soft">{condition.sentence}</span>
      </p>
    </Figure>
  );
}

function Further() {
  const [digits, setDigits] = useState(DIGITS_AT_FIRST);
  const now = proving.value;
  const closed = solution.value === null || now !== null;
  return (
    <form
      class="tools screen-only"
      onSubmit={(event) => {
        event.preventDefault();
        void requestProof('deep', digits);
      }}
    >
      <button type="button" disabled={closed} onClick={() => void requestProof('tight')}>
        Prove tightly
      </button>
      <button type="submit" disabled={closed}>
        Prove in depth
      </button>
      <label>
        to{' '}
        <input
          type="number"
          min={1}
          max={MOST_DIGITS}
          value={digits}
          onInput={(event) => {
            const asked = event.currentTarget.valueAsNumber;
            if (Number.isInteger(asked) && asked >= 1 && asked <= MOST_DIGITS) setDigits(asked);
          }}
        />{' '}
        digits
      </label>
      {now !== null && (
        <>
          <span role="status">{now} under way…</span>
          <button type="button" onClick={() => void cancelProof()}>
            Cancel
          </button>
        </>
      )}
    </form>
  );
}

function Rests({ view }: { view: ProofView }) {
  return (
    <div class="rests">
      {view.theorems.length > 0 && (
        <section>
          <h3>Rests on</h3>
          <ul>
            {view.theorems.map((theorem) => (
              <li key={theorem.source}>
                {theorem.used}: {theorem.statement} <span class="soft">({theorem.source})</span>
              </li>
            ))}
          </ul>
        </section>
      )}
      <section>
        <h3>Not proven</h3>
        <ul>
          {view.notProven.map((sentence) => (
            <li key={sentence}>{sentence}</li>
          ))}
        </ul>
      </section>
    </div>
  );
}

export function Proof() {
  const solved = latestSolution.value?.value;
  if (solved === undefined || solved.trouble !== undefined) {
    return <p class="soft">Nothing is proven yet: the problem is not solved.</p>;
  }
  const view = proof.value;
  const chosen = Math.max(0, chosenEigenvalue.value ?? 0);
  return (
    <>
      {view === null ? (
        <p role="status">The proof is under way…</p>
      ) : (
        <>
          <p class="words">{view.words}</p>
          <SpectrumLine
            label="The chosen eigenvalue’s enclosure"
            start={{ move: 'eigenvalue', index: chosen }}
            afresh={`${view.key} ${String(chosen)}`}
          />
        </>
      )}
      <Further />
      {view !== null && (
        <>
          {view.conditions.map((condition, place) => (
            <Condition key={place} condition={condition} />
          ))}
          <Tolerances />
          <Rests view={view} />
          <Certificate />
        </>
      )}
      <ExactRoad />
    </>
  );
}
