import manifest from '../../package.json' with { type: 'json' };

/** Version of the program, from package.json. */
export const VERSION: string = manifest.version;
