/** Open, examples, save and link. */
import { signal } from '@preact/signals';
import { useRef } from 'preact/hooks';

import { examples, openExample } from '../../shared/examples';
import { copyText, fileName, openFile, saveFile } from '../../shared/files';
import { linkToProblem } from '../../shared/link';
import { EMPTY_DOCUMENT, notice, openDocument, reportTrouble, sheet } from '../../shared/store';
import { withWorkbench } from '../../shared/worker';

/** A link that could not be put on the clipboard, shown to be copied by hand. */
const linkShown = signal<string | null>(null);

async function copyLink(): Promise<void> {
  const link = await linkToProblem();
  if (await copyText(link)) {
    linkShown.value = null;
    notice.value = { tone: 'information', text: 'The link is on the clipboard; it holds the whole problem.' };
  } else {
    linkShown.value = link;
  }
}

async function save(): Promise<void> {
  const json = await withWorkbench((bench) => bench.document_write(sheet.value.value));
  saveFile(fileName(sheet.value.value.title, 'json'), 'application/json', json);
}

function clear(): void {
  openDocument(EMPTY_DOCUMENT, 'The sheet is clear.');
}

export function Tools() {
  const picker = useRef<HTMLInputElement>(null);
  return (
    <div class="tools screen-only">
      <button type="button" onClick={() => picker.current?.click()}>
        Open a file…
      </button>
      <input
        ref={picker}
        type="file"
        hidden
        onChange={(event) => {
          const file = event.currentTarget.files?.[0];
          if (file !== undefined) void openFile(file);
          event.currentTarget.value = '';
        }}
      />
      <label class="examples">
        <span class="unseen">Open an example</span>
        <select
          onChange={(event) => {
            const key = event.currentTarget.value;
            event.currentTarget.value = '';
            if (key !== '') openExample(key).catch(reportTrouble);
          }}
        >
          <option value="" selected>
            Examples
          </option>
          {examples.map(({ key, title }) => (
            <option key={key} value={key}>
              {title}
            </option>
          ))}
        </select>
      </label>
      <button type="button" onClick={() => { save().catch(reportTrouble); }}>
        Save the problem
      </button>
      <button type="button" onClick={() => { copyLink().catch(reportTrouble); }}>
        Copy link
      </button>
      <button type="button" class="quiet" onClick={clear}>
        Clear
      </button>
      {linkShown.value !== null && (
        <label class="link-shown">
          Copy this link:{' '}
          <input readOnly value={linkShown.value} onFocus={(event) => { event.currentTarget.select(); }} />
        </label>
      )}
    </div>
  );
}
