/** For every field of the app's state: saved with the session, kept as a preference of the browser, or never saved. */
export const FIELD_TABLE = {
  recipe: 'session',
  emitters: 'session',
  currentEmitterId: 'session',
  'view.windows': 'session',
  'view.dwellPlot': 'session',
  importAnswers: 'session',
  theme: 'preference',
  undo: 'never',
  hover: 'never',
  'threshold while dragged': 'never',
  results: 'never',
} as const satisfies Readonly<Record<string, 'session' | 'preference' | 'never'>>
