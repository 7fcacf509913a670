export * from './mark';
export * from './messages';
export * from './panel';
export * from './report';
export * from './settings';
export * from './version';
