export interface Direction {
  readonly from: readonly string[];
  readonly packages: readonly string[];
  readonly node?: true | readonly string[];
}
export declare const directions: Readonly<Record<string, Direction>>;
export declare function folderOf(name: string): string;
