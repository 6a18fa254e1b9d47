/** A raw file that cannot be read as a table, with a stable code and what to do. */
export type TabularProblem = 'file-empty' | 'file-binary' | 'one-column' | 'no-numbers' | 'thousands-separators' | 'commas-both-ways' | 'rows-unreadable' | 'column-missing' | 'too-many-columns' | 'line-too-long' | 'workbook-broken' | 'archive-too-large';

const TEXT: Readonly<Record<TabularProblem, string>> = {
  'file-empty': 'The file is empty. Export it again from the instrument.',
  'file-binary': 'The file is neither text nor a workbook. Export it as CSV, TSV, TXT or XLSX.',
  'one-column': 'The file has one column of numbers. Export it with all channels side by side.',
  'no-numbers': 'The file has no rows of numbers. Check that the right file was chosen.',
  'thousands-separators': 'Numbers are written with thousands separators, which could be taken for decimals. Export the file without them.',
  'commas-both-ways': 'Commas part the columns and the decimals alike. Export the file with semicolons or tabs between columns.',
  'rows-unreadable': 'More than half of the rows could not be read. Correct the layout, or export the file again.',
  'column-missing': 'The layout names a column that the file does not have. Correct the mapping.',
  'too-many-columns': 'The file has more than 64 columns. Export only the channels of this test.',
  'line-too-long': 'A line is longer than 100 000 characters. The file is not a table of readings.',
  'workbook-broken': 'The workbook cannot be read. Save it again as XLSX, or as CSV.',
  'archive-too-large': 'The workbook would unpack to far more than its size. It is refused; save it as CSV.',
};

export class TabularRefused extends Error {
  constructor(readonly code: TabularProblem, detail = '') {
    super(detail === '' ? TEXT[code] : `${TEXT[code]} ${detail}`);
    this.name = 'TabularRefused';
  }
}
