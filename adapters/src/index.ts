export * from './contract.js';
