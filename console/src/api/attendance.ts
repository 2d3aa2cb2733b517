/** After this long without a key or pointer the page counts as left alone. */
const attendedMs = 120_000;

let lastInputMs = Date.now();
let isListening = false;

/** Notes every key and pointer from now on. */
export function noteAttendance(): void {
  if (isListening) return;
  isListening = true;
  const note = () => (lastInputMs = Date.now());
  for (const event of ['pointerdown', 'pointermove', 'keydown', 'wheel']) {
    globalThis.addEventListener(event, note, { passive: true, capture: true });
  }
}

/** Whether somebody is at the page: what it asks for by itself must not keep a session alive. */
export function isAttended(): boolean {
  return Date.now() - lastInputMs < attendedMs;
}
