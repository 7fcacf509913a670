export declare function buildAll(options?: { production?: boolean; outdir?: string }): Promise<void>;
