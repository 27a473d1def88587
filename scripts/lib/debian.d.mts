export function findExecutable(name: string, path?: string): string | null;
export function installDebianPackage(name: string): boolean;
export function isExecutable(path: string): boolean;
