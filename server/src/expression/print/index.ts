export { equationText, text, texts } from './text';
export { symbolTex, tex, texAll } from './tex';
export { code, type Code, type CodeOptions } from './code';
export type { CodeStyle } from './code-style';
export { python, pythonStyle, type PythonNames } from './python';
export { javascript, typescript } from './typescript';
export { formatNumber, formatPair, formatQuantity } from './number';
export type { Printed } from './layout';
