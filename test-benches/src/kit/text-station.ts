import type { RigModel } from '@cresthold/shared';
import type { CommandField, CommandMap } from './command-map.types.js';
import type { FaultedModel } from './faulted-model.js';
import { ScpiStatus, type ScpiErrorName } from './scpi-errors.js';

/** How SCPI 1999 (volume 1, section 7.2.1.5) writes "not a number". */
const notANumber = '9.91E37';

export interface TextWatch {
  onWrite(name: string, engineering: number, command: string): void;
  onRefused(command: string): void;
}

/** A command that is refused with an error of the queue. */
class Refusal extends Error {
  constructor(readonly reason: ScpiErrorName) {
    super(reason);
  }
}

type Command = (argument: string) => string | null;

/**
 * A bench as an ASCII instrument after IEEE 488.2 and SCPI: its own commands, the common ones, error queue,
 * `SYSTem:FAULt CODE` for the instructor. Several commands of a line are parted by semicolons.
 */
export class TextStation {
  private readonly status = new ScpiStatus();
  private readonly commands = new Map<string, Command>();

  constructor(
    private readonly map: CommandMap,
    private readonly model: FaultedModel,
    private readonly catchUp: () => void,
    private readonly watch: TextWatch,
  ) {
    this.addCommon();
    for (const field of map.fields) this.addField(field, model);
  }

  /** @returns what is sent back, without its terminator; null for nothing */
  answer(line: string): string | null {
    this.catchUp();
    const answers = line
      .split(';')
      .map((command) => command.trim())
      .filter((command) => command !== '')
      .flatMap((command) => this.carryOut(command) ?? []);
    if (answers.length === 0) return null;
    const text = answers.join(';');
    return this.model.isActive('corrupt') ? garbled(text) : text;
  }

  private carryOut(command: string): string | null {
    const [header = '', ...rest] = command.split(/\s+/);
    const name = header.toUpperCase().replace(/^:/, '');
    const isInstructor = name.startsWith('SYST:FAUL') || name.startsWith('SYSTEM:FAULT');
    if (!isInstructor && (this.model.isActive('silence') || this.model.isActive('reboot'))) return null;
    try {
      if (!isInstructor && this.model.isActive('busy')) throw new Refusal('execution');
      const known = this.commands.get(name);
      if (!known) throw new Refusal('undefinedHeader');
      return known(rest.join(' '));
    } catch (error) {
      if (!(error instanceof Refusal)) throw error;
      this.status.raise(error.reason);
      if (!header.endsWith('?')) this.watch.onRefused(command);
      return null;
    }
  }

  private addCommon(): void {
    const { status } = this;
    const ask = (header: string, answer: () => string) =>
      this.add(`${header}?`, (argument) => {
        if (argument !== '') throw new Refusal('parameterNotAllowed');
        return answer();
      });
    const tell = (header: string, act: (value: number) => void) =>
      this.add(header, (argument) => {
        act(numberOf(argument));
        return null;
      });
    const act = (header: string, doIt: () => void) =>
      this.add(header, (argument) => {
        if (argument !== '') throw new Refusal('parameterNotAllowed');
        doIt();
        return null;
      });
    ask('*IDN', () => `Brackwater Test Station,${this.map.model},0,1`);
    ask('*ESR', () => String(status.takeEsr()));
    ask('*ESE', () => String(status.ese));
    ask('*SRE', () => String(status.sre));
    ask('*STB', () => String(status.statusByte));
    ask('*OPC', () => '1');
    ask('*TST', () => '0');
    tell('*ESE', (value) => (status.ese = byteOf(value)));
    tell('*SRE', (value) => (status.sre = byteOf(value)));
    act('*CLS', () => status.clear());
    act('*OPC', () => status.complete());
    act('*WAI', () => {});
    act('*RST', () => this.model.model.reboot());
    ask('SYSTem:ERRor', () => status.nextError());
    ask('SYSTem:ERRor:NEXT', () => status.nextError());
    ask('SYSTem:VERSion', () => '1999.0');
    ask('SYSTem:FAULt', () => String(this.model.faultByHand));
    tell('SYSTem:FAULt', (code) => {
      if (!this.model.setFaultByHand(code)) throw new Refusal('outOfRange');
    });
  }

  private addField(field: CommandField, model: RigModel): void {
    const value = model.values.find(({ name }) => name === field.name);
    if (!value) throw new Error(`The model has no value "${field.name}".`);
    this.add(`${field.header}?`, (argument) => {
      if (argument !== '') throw new Refusal('parameterNotAllowed');
      if (this.model.isActive('exception') && !this.model.isOfController(field.name)) {
        throw new Refusal('hardware');
      }
      if (value.points === 1) return textOf(model.read(field.name), field.decimals);
      return Array.from(model.readTrace(field.name), (point) => textOf(point, field.decimals)).join(',');
    });
    if (value.isWritable) this.add(field.header, (argument) => this.command(field, argument));
  }

  private command(field: CommandField, argument: string): null {
    const engineering = numberOf(argument);
    const [min, max] = field.writeRange ?? [-Infinity, Infinity];
    if (!(engineering >= min && engineering <= max)) throw new Refusal('outOfRange');
    if (!this.model.write(field.name, engineering)) throw new Refusal('settingsConflict');
    this.watch.onWrite(field.name, engineering, `${field.header} ${argument}`);
    return null;
  }

  /** Under its long form, its short form, and every mixture of them. */
  private add(header: string, command: Command): void {
    for (const spelling of spellings(header)) {
      if (this.commands.has(spelling)) throw new Error(`Two commands are called "${spelling}".`);
      this.commands.set(spelling, command);
    }
  }
}

/** @example spellings('SOURce:DUTY') // ['SOUR:DUTY', 'SOURCE:DUTY'] */
function spellings(header: string): string[] {
  const nodes = header.split(':').map((node) => {
    const short = node.replace(/[a-z]+/, '');
    const long = node.toUpperCase();
    return short === long ? [long] : [short, long];
  });
  return nodes.reduce<string[]>(
    (heads, forms) => heads.flatMap((head) => forms.map((form) => (head === '' ? form : `${head}:${form}`))),
    [''],
  );
}

function numberOf(argument: string): number {
  if (argument === '') throw new Refusal('missingParameter');
  if (argument.includes(',')) throw new Refusal('parameterNotAllowed');
  const value = Number(argument);
  if (!Number.isFinite(value)) throw new Refusal('numeric');
  return value;
}

function byteOf(value: number): number {
  if (!Number.isInteger(value) || value < 0 || value > 255) throw new Refusal('outOfRange');
  return value;
}

function textOf(value: number, decimals: number): string {
  return Number.isFinite(value) ? value.toFixed(decimals) : notANumber;
}

/** As a line with a bad contact gives it: every second character is another. */
function garbled(text: string): string {
  return Array.from(text, (char, i) => (i % 2 ? char : String.fromCharCode(char.charCodeAt(0) ^ 0x55))).join(
    '',
  );
}
