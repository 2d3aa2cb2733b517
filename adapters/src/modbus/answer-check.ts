/** Bytes of unit number, function code and exception code. */
export const exceptionBytes = 3;

/** Function codes whose good answer repeats the whole request. */
const echoed = new Set([5, 6, 22]);

function word(bytes: Uint8Array, at: number): number {
  return ((bytes[at] ?? 0) << 8) | (bytes[at + 1] ?? 0);
}

/**
 * Bytes of unit number and PDU of the good answer to a request.
 *
 * @param request unit number and PDU
 * @source MODBUS Application Protocol V1.1b3, 6
 */
export function answerBytesOf(request: Uint8Array): number {
  switch (request[1]) {
    case 1:
    case 2:
      return 3 + Math.ceil(word(request, 4) / 8);
    case 3:
    case 4:
    case 23:
      return 3 + 2 * word(request, 4);
    case 22:
      return 8;
    default:
      return 6;
  }
}

/** Whether an answer is the exception that goes with the request. */
export function isExceptionTo(request: Uint8Array, answer: Uint8Array): boolean {
  return (
    answer.length === exceptionBytes && answer[0] === request[0] && answer[1] === ((request[1] ?? 0) | 0x80)
  );
}

/**
 * What keeps an answer from being that to the request, or null where it is: the good one, or its exception.
 *
 * @param request unit number and PDU
 * @param answer unit number and PDU
 */
export function misfitOf(request: Uint8Array, answer: Uint8Array): string | null {
  const [unit, code = 0] = request;
  if (answer[0] !== unit) return `unit ${answer[0]} answered instead of ${unit}`;
  if (isExceptionTo(request, answer)) return null;
  if (answer[1] !== code) return `the answer is to function code ${answer[1]}, not ${code}`;
  const bytes = answerBytesOf(request);
  if (answer.length !== bytes) return `the answer has ${answer.length} bytes instead of ${bytes}`;
  return contentMisfit(request, answer, code);
}

function contentMisfit(request: Uint8Array, answer: Uint8Array, code: number): string | null {
  if (code <= 4 || code === 23) {
    const count = answer.length - 3;
    return answer[2] === count ? null : `the answer counts ${answer[2]} bytes and has ${count}`;
  }
  // Function codes 15 and 16 repeat address and quantity only.
  const repeated = echoed.has(code) ? answer.length : 6;
  for (let at = 2; at < repeated; at += 1) {
    if (answer[at] !== request[at]) return 'the device confirmed something else than was written';
  }
  return null;
}
