/** What was found in a text: diagnostics, repairs, questions and choices. */
import type {
  Adjustment,
  Diagnostic,
  Disagreements,
  Question,
  Repair,
  TextReading,
} from '../../shared/generated/eigenledger';

const LISTED = 12;

function placeOf({ row, col }: Diagnostic): string {
  if (row === undefined) return 'whole text';
  return col === undefined ? `row ${String(row)}` : `row ${String(row)}, column ${String(col)}`;
}

/** What was expected comes as a sentence or as the end of one. */
export function expectedIn({ expected }: Diagnostic): string {
  if (expected === '' || expected.endsWith('.')) return expected;
  return `Expected: ${expected}.`;
}

const SEVERITY_WORDS = { error: 'to mend', warning: 'look here', note: 'noted' } as const;

function DiagnosticList(props: {
  reading: TextReading;
  onShow: (from: number, to: number) => void;
  onRepair: (repair: Repair) => void;
}) {
  const { diagnostics } = props.reading;
  const shown = diagnostics.slice(0, LISTED);
  const more = diagnostics.length - shown.length;
  if (shown.length === 0) return null;
  return (
    <ul class="findings" aria-label="Found in the text">
      {shown.map((diagnostic, index) => (
        <li key={index} class={diagnostic.severity}>
          <button type="button" class="quiet place" onClick={() => { props.onShow(diagnostic.from, diagnostic.to); }}>
            {placeOf(diagnostic)}
          </button>
          <span class="weight">{SEVERITY_WORDS[diagnostic.severity]}</span>
          <span class="sentence">
            {diagnostic.message} <span class="soft">{expectedIn(diagnostic)}</span>
          </span>
          <span class="repairs">
            {diagnostic.repairs.map((repair) => (
              <button key={repair.key} type="button" onClick={() => { props.onRepair(repair); }}>
                {repair.label}
              </button>
            ))}
          </span>
        </li>
      ))}
      {more > 0 && <li class="note">and {more} more of the kind</li>}
    </ul>
  );
}

function Asked({ question, onAnswer }: { question: Question; onAnswer: (key: string | undefined) => void }) {
  return (
    <fieldset class="question">
      <legend>{question.text}</legend>
      {question.answers.map(({ key, label, shape, corner, chosen }) => (
        <button key={key} type="button" class="answer" aria-pressed={chosen} onClick={() => { onAnswer(key); }}>
          <span>{label}</span>
          <span class="soft">{shape}</span>
          <span class="digits corner" aria-hidden="true">
            {corner.map((row) => row.join('  ')).join('\n')}
          </span>
        </button>
      ))}
    </fieldset>
  );
}

const ADJUSTMENTS: readonly { key: Adjustment; label: string }[] = [
  { key: 'lower', label: 'take the lower triangle' },
  { key: 'upper', label: 'take the upper triangle' },
  { key: 'mean', label: 'take the mean of both' },
];

function Disagreeing(props: { disagreements: Disagreements; onAdjust: (choice: Adjustment) => void }) {
  const { total, pairs, roundingSized } = props.disagreements;
  return (
    <fieldset class="question">
      <legend>
        {total === 1 ? 'One pair of mirrored cells disagrees.' : `${String(total)} pairs of mirrored cells disagree.`}{' '}
        {roundingSized ? 'The differences are no larger than rounding errors.' : ''}
      </legend>
      <div class="pairs-scroll">
        <table class="pairs">
          <thead>
            <tr>
              <th scope="col">row, column</th>
              <th scope="col">below the diagonal</th>
              <th scope="col">above, mirrored</th>
              <th scope="col">apart by</th>
            </tr>
          </thead>
          <tbody>
            {pairs.map((pair) => (
              <tr key={`${String(pair.row)},${String(pair.col)}`}>
                <td>
                  {pair.row}, {pair.col}
                </td>
                <td class="digits">{pair.lower}</td>
                <td class="digits">{pair.upper}</td>
                <td class="digits">{pair.difference}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {pairs.length < total && <p class="soft">The first {pairs.length} are listed.</p>}
      <div class="row">
        {ADJUSTMENTS.map(({ key, label }) => (
          <button key={key} type="button" onClick={() => { props.onAdjust(key); }}>
            {label}
          </button>
        ))}
      </div>
      <p class="soft">The choice is part of the problem: it is kept in the file and entered in the ledger.</p>
    </fieldset>
  );
}

function summaryOf(reading: TextReading): string {
  const parts = [reading.layout];
  if (reading.rows > 0) {
    parts.push(
      reading.rows === reading.cols
        ? `order ${String(reading.rows)}`
        : `${String(reading.rows)} rows of up to ${String(reading.cols)} cells`,
      reading.complex ? 'complex' : 'real',
    );
  }
  if (reading.tolerances.length > 0) {
    parts.push(
      reading.tolerances.length === 1
        ? 'one entry with a tolerance'
        : `${String(reading.tolerances.length)} entries with tolerances`,
    );
  }
  return parts.filter((part) => part !== '').join('; ');
}

const ADJUSTED_WORDS: Record<Adjustment, string> = {
  lower: 'Where mirrored cells disagree, the lower triangle counts',
  upper: 'Where mirrored cells disagree, the upper triangle counts',
  mean: 'Where mirrored cells disagree, their mean counts',
};

/** Everything said about one text, under its editor. */
export function Findings(props: {
  reading: TextReading;
  onShow: (from: number, to: number) => void;
  onRepair: (repair: Repair) => void;
  onAnswer: (key: string | undefined) => void;
  onAdjust: (choice: Adjustment | undefined) => void;
}) {
  const { reading } = props;
  return (
    <div aria-live="polite" class="reading">
      <p class="soft">
        Read as: {summaryOf(reading)}
        {reading.answered && (
          <>
            {' '}
            (by choice)
            <button type="button" class="quiet" onClick={() => { props.onAnswer(undefined); }}>
              read afresh
            </button>
          </>
        )}
      </p>
      {reading.adjusted && (
        <p>
          {ADJUSTED_WORDS[reading.adjusted]} (by choice).
          <button type="button" class="quiet" onClick={() => { props.onAdjust(undefined); }}>
            choose again
          </button>
        </p>
      )}
      {reading.question && <Asked question={reading.question} onAnswer={props.onAnswer} />}
      <DiagnosticList reading={reading} onShow={props.onShow} onRepair={props.onRepair} />
      {reading.disagreements && <Disagreeing disagreements={reading.disagreements} onAdjust={props.onAdjust} />}
    </div>
  );
}
