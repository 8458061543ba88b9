// What: the syntax that Metro and the two screen test projects understand. Metro would manage without it; Jest would not.
// Not here: aliases. `@/` comes from tsconfig.json in Metro and from moduleNameMapper in Jest.
module.exports = function (api) {
  api.cache(true);
  return { presets: ['babel-preset-expo'] };
};
