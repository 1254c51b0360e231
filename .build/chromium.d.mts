export declare function findChromium(environment?: Record<string, string | undefined>): string | undefined;
export declare function chromiumLaunchOptions(executablePath: string): { executablePath: string; headless: boolean; args: string[] };
