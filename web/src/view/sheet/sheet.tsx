/** The Sheet section: the report that is handed over, to see, print and download. */
import { useRef } from 'preact/hooks';

import { saveFile } from '../../shared/files';
import { figuresKey } from '../../shared/proof';
import { headingKey, latestSolution, sheet, solution } from '../../shared/store';
import { useRemote } from '../parts/remote';

export function Sheet() {
  const frame = useRef<HTMLIFrameElement>(null);
  const key = figuresKey.value;
  const file = useRemote(key === null ? null : `${key} ${headingKey.value}`, async (bench) => {
    await bench.take_heading(sheet.value.value);
    return bench.report();
  });
  if (latestSolution.value === null) return <p class="soft">No sheet yet: the problem is not solved.</p>;
  if (file === undefined) return null;
  return (
    <>
      <p class="row screen-only">
        <button
          type="button"
          class="primary"
          disabled={solution.value === null}
          onClick={() => { saveFile(file.name, file.mediaType, file.text); }}
        >
          Download the sheet
        </button>
        <button type="button" disabled={solution.value === null} onClick={() => frame.current?.contentWindow?.print()}>
          Print the sheet
        </button>
        <span class="soft">one file that opens in any browser, without a network</span>
      </p>
      <div class="sheet-preview screen-only">
        <iframe ref={frame} title="The sheet" sandbox="allow-same-origin allow-modals" srcdoc={file.text} />
      </div>
    </>
  );
}
