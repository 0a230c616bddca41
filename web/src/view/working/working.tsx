/** The Working section: the ledger of the run that produced the result. */
import { figuresKey, proof } from '../../shared/proof';
import { latestSolution } from '../../shared/store';
import { Figure } from '../parts/margin';
import { useRemote } from '../parts/remote';
import { EntryPanel } from './entry';
import { History } from './history';
import { LedgerList } from './list';

function ClosingBalance() {
  const key = figuresKey.value;
  const closing = useRemote(key, (bench) => bench.closing_balance());
  if (closing === undefined) return null;
  return (
    <Figure mark={closing.standing} reason={closing.reason} label="closing balance">
      <p class="closing">
        closing balance <strong class="digits">{closing.figure}</strong>
        {proof.value === null && <span class="soft"> (measured, not yet proven)</span>}
      </p>
    </Figure>
  );
}

export function Working() {
  const solved = latestSolution.value;
  if (solved === null) return <p class="soft">No entries yet: the problem is not solved.</p>;
  const { ledger, trouble } = solved.value;
  return (
    <>
      <p>{ledger.words}</p>
      {trouble !== undefined && <p class="notice warn">{trouble}</p>}
      <History revision={solved.revision} />
      <div class="ledger">
        <LedgerList summary={ledger} revision={solved.revision} />
        <EntryPanel revision={solved.revision} entries={ledger.entries} />
      </div>
      <dl class="totals">
        <div>
          <dt>trace</dt>
          <dd class="digits">{ledger.trace}</dd>
        </div>
        <div>
          <dt>Frobenius norm</dt>
          <dd class="digits">{ledger.norm}</dd>
        </div>
        <div>
          <dt>drift</dt>
          <dd>{ledger.drift}</dd>
        </div>
      </dl>
      <ClosingBalance />
    </>
  );
}
