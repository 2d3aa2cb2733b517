/** The four tables of a Modbus device. */
export type RegisterTable = 'coil' | 'discrete-input' | 'input-register' | 'holding-register';

/** How a value lies in registers; two registers with the high word first; `bit` in coils and discrete inputs. */
export type RegisterType = 'u16' | 'i16' | 'u32' | 'i32' | 'f32' | 'bit';

/** Where one value of the model lies. A trace takes `points` values from its address on. */
export interface RegisterField {
  /** Name of the value in the model. */
  readonly name: string;
  readonly table: RegisterTable;
  /** As in the protocol, from 0. */
  readonly address: number;
  readonly type: RegisterType;
  /** Engineering units per count; 1 where left out, of no use for f32 and bit. */
  readonly scale?: number;
  /** Engineering values that a write may have; another is answered by exception 03. Left out: what the type holds. */
  readonly writeRange?: readonly [min: number, max: number];
  /**
   * What the controller knows of itself: commands, heartbeat, flags. Faults of instruments pass it by.
   * Values that can be written are so in any case.
   */
  readonly isOfController?: boolean;
}

/** The registers of a bench. Two fields may show the same value in two tables. */
export interface RegisterMap {
  /** Modbus unit that answers, 1 where left out. */
  readonly unit?: number;
  readonly fields: readonly RegisterField[];
}
