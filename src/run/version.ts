/** Version of the program, as package.json states it; a test holds the two together. */
export const version = '0.1.0';
