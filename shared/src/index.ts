export * from './mark';
export * from './messages';
export * from './report';
export * from './settings';
export * from './version';
