/** The exact road: what a hand calculation is held against. */
import { Fragment } from 'preact';

import type { ExactView } from '../../shared/generated/eigenledger';
import { exact, proving, requestExact } from '../../shared/proof';
import { solution } from '../../shared/store';
import { Figure } from '../parts/margin';

const EXACT = 'Found in rational arithmetic: no rounding took place.';

function Form({ view }: { view: ExactView }) {
  const order = view.diagonal.length;
  return (
    <div class="scroll-figures" tabIndex={0}>
      <table class="matrix exact-form">
        <caption>
          Tridiagonal form, off-diagonals taken positive
          {view.splits.length > 0 && `; it splits before row ${view.splits.join(' and row ')}`}
        </caption>
        <tbody>
          {view.diagonal.map((alpha, row) => (
            <tr key={row}>
              {Array.from({ length: order }, (_, col) => (
                <td key={col} class="digits">
                  {col === row ? alpha : Math.abs(col - row) === 1 ? view.offDiagonal[Math.min(row, col)] : ''}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function Polynomial({ view }: { view: ExactView }) {
  return (
    <p class="polynomial">
      det(λ − A) ={' '}
      {view.polynomial.map((term) => (
        <Fragment key={term.power}>
          {' '}
          {term.sign} {term.coefficient === '' ? '' : `${term.coefficient} `}
          {term.power > 0 && <>λ{term.power > 1 && <sup>{term.power}</sup>}</>}
        </Fragment>
      ))}
    </p>
  );
}

function Eigenvalues({ view }: { view: ExactView }) {
  return (
    <ul class="exact-values">
      {view.eigenvalues.map((eigenvalue) => (
        <li key={eigenvalue.first}>
          λ<sub>{eigenvalue.first}</sub>
          {eigenvalue.multiplicity > 1 && ` with multiplicity ${String(eigenvalue.multiplicity)}`}
          {eigenvalue.form === undefined ? (
            <span class="soft">: neither rational nor a quadratic surd</span>
          ) : (
            <>
              {' '}
              = <span class="digits">{eigenvalue.form}</span>
            </>
          )}
        </li>
      ))}
    </ul>
  );
}

function Found({ view }: { view: ExactView }) {
  return (
    <>
      <Figure mark="proven" reason={EXACT} label="exact tridiagonal form">
        <Form view={view} />
      </Figure>
      <Figure mark="proven" reason={EXACT} label="characteristic polynomial">
        <Polynomial view={view} />
      </Figure>
      <Figure mark="proven" reason={`${EXACT} Multiplicities are exact.`} label="exact eigenvalues">
        <Eigenvalues view={view} />
      </Figure>
      <p class="soft">{view.growth}</p>
    </>
  );
}

export function ExactRoad() {
  const answer = exact.value;
  const closed = solution.value === null || proving.value !== null;
  return (
    <>
      <h3 class={answer === null ? 'screen-only' : ''}>The exact road</h3>
      {answer === null && (
        <p class="screen-only">
          <button type="button" disabled={closed} onClick={() => void requestExact(false)}>
            Take the exact road
          </button>{' '}
          <span class="soft">
            tridiagonal form, characteristic polynomial and multiplicities in rational arithmetic
          </span>
        </p>
      )}
      {answer?.outcome === 'closed' && (
        <p>
          {answer.reason}{' '}
          {answer.mayBeRaised && (
            <button type="button" disabled={closed} onClick={() => void requestExact(true)}>
              Go on all the same
            </button>
          )}
        </p>
      )}
      {answer?.outcome === 'found' && <Found view={answer.view} />}
    </>
  );
}
