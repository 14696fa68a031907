export * from './nutrients'
