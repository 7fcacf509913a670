export * from './mark';
export * from './messages';
export * from './panel';
export * from './project-settings';
export * from './report';
export * from './settings';
export * from './version';
