// What the build puts into the service worker.
declare const SHELL_FILES: [string, string][];
declare const RUNTIME_FILES: [string, string][];
declare const BUILD: string;
declare const RUNTIME: string;
