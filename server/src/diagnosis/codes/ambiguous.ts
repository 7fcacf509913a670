import type { CodeDoc } from './doc';

export const ambiguous: CodeDoc = {
  code: 'ambiguous',
  about: 'declaration',
  title: 'something can be understood in two ways',
  meaning: `A name of the code could mean two declared symbols, or a system's name is declared more than once in the project.`,
  why: `A guess could make a wrong verdict. So the question goes to the one who knows.`,
  found: `The spellings that a declared symbol may take in code are compared with the names the code uses; systems that are
referred to by name are looked up in the whole project.`,
  example: `coordinates th, thd                           is \`thd\` in the code the coordinate thd or the velocity th'?`,
  remedy: `State the meaning with a \`reads\` line, for example \`reads thd = th'\`, or give one of the systems another name.`,
};
