import { plainText } from './escaped-text.js';

const placeholder = /\{([^{}]*)\}/g;

/** The placeholders of a command template, without their braces. */
export function placeholdersOf(template: string): string[] {
  return [...template.matchAll(placeholder)].map((match) => match[1] ?? '');
}

/**
 * A command with its placeholders filled and its escapes resolved.
 *
 * @example
 * renderCommand('SOUR{channel}:VOLT {value}', { channel: '2', value: '1.50' }) // 'SOUR2:VOLT 1.50'
 */
export function renderCommand(template: string, values: { channel: string; value?: string }): string {
  return plainText(template).replace(placeholder, (whole, name: string) => {
    if (name === 'channel') return values.channel;
    return name === 'value' ? (values.value ?? whole) : whole;
  });
}
