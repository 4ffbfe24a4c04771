// Stands in for the package of this name, which only refuses to be bundled for browsers.
export {};
