/** The word that every declaration begins with: a file without it declares and claims nothing. */
export const declarationMark = '@visviva';
