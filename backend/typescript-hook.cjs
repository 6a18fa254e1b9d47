// Lets a process or worker thread that a test starts run the TypeScript sources: compiled through swc as the build does it.
const { existsSync, readFileSync } = require('node:fs');
const Module = require('node:module');
const { join } = require('node:path');
const { transformSync } = require('@swc/core');

const COMMON = '@strainwright/common/';
const options = { ...JSON.parse(readFileSync(join(__dirname, '..', '.swcrc'), 'utf8')), swcrc: false, sourceMaps: 'inline' };

Module._extensions['.ts'] = (module, filename) => module._compile(transformSync(readFileSync(filename, 'utf8'), { ...options, filename }).code, filename);

const resolve = Module._resolveFilename;
Module._resolveFilename = function resolveSource(request, ...rest) {
  if (request.startsWith(COMMON)) {
    const source = join(__dirname, '..', 'common', 'src', `${request.slice(COMMON.length)}.ts`);
    if (existsSync(source)) return source;
  }
  return resolve.call(this, request, ...rest);
};
