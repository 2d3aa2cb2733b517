/**
 * The colours of the console, as concrete values, because canvases need them too.
 * Colour is kept for the abnormal: red for trips and the emergency stop, amber for warnings,
 * blue for what a person must do. Everything normal is ink on paper.
 */
export interface Paper {
  /** Ground of the page. */
  ground: string;
  /** Ground of panels and fields. */
  sheet: string;
  /** Ground of what is picked out: a chosen row, a bar's rest. */
  shade: string;
  ink: string;
  inkSoft: string;
  /** Borders of controls; 3:1 against the sheet. */
  outline: string;
  /** Hairline rules between things. */
  rule: string;
  /** Printed grid of chart paper. */
  grid: string;
  trip: string;
  warn: string;
  act: string;
  /** Ground behind text in the colour of the same name. */
  tripWash: string;
  warnWash: string;
  actWash: string;
  /** The emergency stop's face; the same in both rooms, white text on it. */
  stopFace: string;
  /** Colours of traces, told apart with any of the common colour-vision deficiencies. */
  traces: readonly string[];
}

export type SchemeName = 'light' | 'dark';

export const papers: Record<SchemeName, Paper> = {
  light: {
    ground: '#f3ecdb',
    sheet: '#fcf8ed',
    shade: '#ebe2cc',
    ink: '#1d1a15',
    inkSoft: '#5a5143',
    outline: '#857a65',
    rule: '#cfc3a6',
    grid: '#e6dcc4',
    trip: '#a8101c',
    warn: '#7d4e00',
    act: '#0b4f8a',
    tripWash: '#f9dfd9',
    warnWash: '#f8e5b4',
    actWash: '#dbe8f2',
    stopFace: '#c0121f',
    traces: ['#1d1a15', '#389475', '#ae32ae', '#592259', '#7d9438', '#204f17'],
  },
  dark: {
    ground: '#14120e',
    sheet: '#1d1a15',
    shade: '#2a2620',
    ink: '#efe7d6',
    inkSoft: '#b9ae9a',
    outline: '#83796a',
    rule: '#3f392f',
    grid: '#2b2720',
    trip: '#ff8f87',
    warn: '#f3b64a',
    act: '#8fc1f2',
    tripWash: '#431714',
    warnWash: '#3a2a08',
    actWash: '#14283b',
    stopFace: '#c0121f',
    traces: ['#efe7d6', '#8bce7e', '#a63f8d', '#9e8cd4', '#608f56', '#cc94b0'],
  },
};

/** Trace colour of the nth trace; after the last it begins again. */
export function traceColour(paper: Paper, index: number): string {
  return paper.traces[index % paper.traces.length] ?? paper.ink;
}
