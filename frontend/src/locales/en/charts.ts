export default {
  table: 'Table',
  hideTable: 'Hide the table',
  tableOf: 'The figures of: {title}',
  png: 'Picture',
  csv: 'CSV',
  loading: 'Drawing',
} as const
