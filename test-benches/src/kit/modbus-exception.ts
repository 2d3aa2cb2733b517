const exceptionCodes = {
  function: 0x01,
  address: 0x02,
  value: 0x03,
  'device-failure': 0x04,
  busy: 0x06,
  'no-such-unit': 0x0b,
} as const;

export type ModbusExceptionKind = keyof typeof exceptionCodes;

/** An answer by exception; the codes are those of the Modbus application protocol, V1.1b3, section 7. */
export class ModbusException extends Error {
  readonly code: number;

  constructor(readonly kind: ModbusExceptionKind) {
    super(`Modbus exception: ${kind}`);
    this.name = 'ModbusException';
    this.code = exceptionCodes[kind];
  }
}
