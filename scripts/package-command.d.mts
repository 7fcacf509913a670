export declare function packageCommand(folder: string): Promise<void>;
