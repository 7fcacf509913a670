export * from './mark';
export * from './messages';
export * from './panel';
export * from './project-settings';
export * from './panel-page';
export * from './report';
export * from './settings';
export * from './version';
