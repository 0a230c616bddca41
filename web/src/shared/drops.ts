/** A file dropped on the page is opened, on the claims claimed; a first paste outside any field is opened too. */
import { isUntouchedExample, replaceExample } from './examples';
import { claimFiles } from './claims';
import { openFile } from './files';

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
    const files = [...(event.dataTransfer?.files ?? [])];
    const [first] = files;
    if (first === undefined) return;
    event.preventDefault();
    // Over the claims a file is another program's output; elsewhere a problem.
    if (event.target instanceof Element && event.target.closest('#claims') !== null) void claimFiles(files);
    else void openFile(first);
  });
  addEventListener('paste', (event) => {
    const text = event.clipboardData?.getData('text/plain') ?? '';
    if (text === '' || isField(event.target) || !isUntouchedExample()) return;
    event.preventDefault();
    replaceExample(text);
  });
}
