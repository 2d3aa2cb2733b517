export { adaptersQuery, useAdapters } from './api/adapters.js';
