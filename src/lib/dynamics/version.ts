/** Version of the engine, printed with every result. */
export const ENGINE_VERSION = '1.0.0';
