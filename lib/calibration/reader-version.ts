/** Version of everything that turns image and description into values and differences; part of every digest of their input. */
export const READER_VERSION = "1.0.0";
