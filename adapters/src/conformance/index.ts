/** The conformance kit for plug-ins, at `@cresthold/adapters/conformance`. */
export * from './conformance-fixture.js';
export { describeAdapterConformance, describeAdapterLeaks } from './describe-adapter-conformance.js';
