// The backend's own tests, for a run of their own on another database.
import { dirname } from 'node:path';
import { fileURLToPath } from 'node:url';
import root from '../../jest.config.mjs';

const here = dirname(fileURLToPath(import.meta.url));
const { displayName: _displayName, ...backend } = root.projects.find((project) => project.displayName === 'backend');
export default { ...backend, rootDir: `${here}/../../backend` };
