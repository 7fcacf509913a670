import type { Rule } from 'eslint';
export declare const importDirections: Rule.RuleModule;
