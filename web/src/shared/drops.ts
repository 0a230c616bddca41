/** A file dropped anywhere on the page is opened; a first paste outside any field too. */
import { isUntouchedExample } from './examples';
import { openFile } from './files';
import { EMPTY_DOCUMENT, replaceDocument } from './store';

function holdsFiles(event: DragEvent): boolean {
  return event.dataTransfer?.types.includes('Files') ?? false;
}

function isField(target: EventTarget | null): boolean {
  return target instanceof Element && target.closest('input, textarea, select, [contenteditable="true"]') !== null;
}

export function followDrops(): void {
  const { classList } = document.body;
  addEventListener('dragover', (event) => {
    if (!holdsFiles(event)) return;
    event.preventDefault();
    classList.add('dropping');
  });
  addEventListener('dragleave', (event) => {
    if (event.relatedTarget === null) classList.remove('dropping');
  });
  addEventListener('drop', (event) => {
    classList.remove('dropping');
    const file = event.dataTransfer?.files[0];
    if (file === undefined) return;
    event.preventDefault();
    void openFile(file);
  });
  addEventListener('paste', (event) => {
    const text = event.clipboardData?.getData('text/plain') ?? '';
    if (text === '' || isField(event.target) || !isUntouchedExample()) return;
    event.preventDefault();
    replaceDocument({ ...EMPTY_DOCUMENT, matrix: text });
  });
}
