/** How good the whole set is, in units of rounding. */
import { useState } from 'preact/hooks';

import { latestSolution } from '../../shared/store';
import { useRemote } from '../parts/remote';

export function Checks() {
  const [wanted, setWanted] = useState(false);
  const revision = latestSolution.value?.revision;
  const checks = useRemote(wanted && revision !== undefined ? String(revision) : null, (bench) => bench.checks());
  return (
    <details class="checks" onToggle={(event) => { setWanted(event.currentTarget.open); }}>
      <summary>backward error and orthogonality of the whole set</summary>
      {checks !== undefined && (
        <dl class="facts">
          {checks.facts.map((fact) => (
            <div key={fact.name}>
              <dt>{fact.name}</dt>
              <dd class="digits">{fact.figure}</dd>
            </div>
          ))}
        </dl>
      )}
      <p class="soft">u is 2⁻⁵³, the unit of rounding; figures below 10 are what rounding alone leaves.</p>
    </details>
  );
}
