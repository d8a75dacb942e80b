/** Version of the computation. Changes whenever any digit of any estimate may change. */
export const ENGINE_VERSION = '1.0.0';
