/** Writes FILE.br beside every file named: brotli at its best, once a build. */
import { readFile, writeFile } from 'node:fs/promises';
import { argv } from 'node:process';
import { promisify } from 'node:util';
import { brotliCompress, constants } from 'node:zlib';

const compress = promisify(brotliCompress);

for (const path of argv.slice(2)) {
  const plain = await readFile(path);
  const packed = await compress(plain, {
    params: { [constants.BROTLI_PARAM_QUALITY]: 11, [constants.BROTLI_PARAM_SIZE_HINT]: plain.length },
  });
  if (packed.length < plain.length) await writeFile(`${path}.br`, packed);
}
