// Lets a process or worker thread that a test starts run the TypeScript sources: compiled through swc as the build does it.
import { existsSync, readFileSync } from 'node:fs';
import Module from 'node:module';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { transformSync } from '@swc/core';

const root = dirname(dirname(fileURLToPath(import.meta.url)));
const COMMON = '@strainwright/common/';
const options = { ...JSON.parse(readFileSync(join(root, '.swcrc'), 'utf8')), swcrc: false, sourceMaps: 'inline' };

Module._extensions['.ts'] = (module, filename) => module._compile(transformSync(readFileSync(filename, 'utf8'), { ...options, filename }).code, filename);

const resolve = Module._resolveFilename;
Module._resolveFilename = function resolveSource(request, ...rest) {
  if (request.startsWith(COMMON)) {
    const source = join(root, 'common', 'src', `${request.slice(COMMON.length)}.ts`);
    if (existsSync(source)) return source;
  }
  return resolve.call(this, request, ...rest);
};
