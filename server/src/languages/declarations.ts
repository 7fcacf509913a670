import type { Program } from '../program/form';
import type { LanguageCore } from './language';

/** `.visviva` files: declarations alone, one comment as it were, and no code. */
export const core: LanguageCore = {
  parse(_file, text): Program {
    const span = { start: 0, end: text.length };
    return {
      language: 'visviva',
      indexBase: 0,
      body: [],
      comments: text.includes('@visviva') ? [{ span, lineMarks: [], subject: { kind: 'file' } }] : [],
      errors: [],
    };
  },
  library: {
    scalars: new Map(),
    constants: new Map(),
    intrinsics: new Map(),
    methods: new Map(),
    modules: new Map(),
    ignorable: new Set(),
  },
};
