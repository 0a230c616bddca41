/** The Eigenpairs section: values with what is known of them, and vectors. */
import { solution, latestSolution } from '../../shared/store';
import { SpectrumLine } from '../spectrum/line';
import { Checks } from './checks';
import { Tools } from './tools';
import { Values } from './values';

const WHOLE = { move: 'all' } as const;

export function Eigenpairs() {
  const solved = latestSolution.value?.value;
  if (solved === undefined) return <p class="soft">No values yet: the problem is not solved.</p>;
  if (solved.trouble !== undefined) {
    return (
      <div class="notice warn">
        <p>{solved.trouble}</p>
      </div>
    );
  }
  return (
    <>
      <SpectrumLine label="The spectrum" start={WHOLE} />
      <Tools settled={solution.value !== null} />
      <Values order={solved.order} />
      <Checks />
    </>
  );
}
