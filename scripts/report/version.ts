/** As in package.json; a test keeps them the same, since the built file has no package beside it. */
export const VERSION = "0.1.0";
