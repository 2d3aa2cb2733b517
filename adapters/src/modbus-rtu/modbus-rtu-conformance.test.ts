import { describe, it } from 'vitest';
import { describeAdapterConformance } from '../conformance/describe-adapter-conformance.js';
import { modbusRtuFixture } from './modbus-rtu.fixture.js';

describeAdapterConformance(modbusRtuFixture, { describe, it });
