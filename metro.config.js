// What: how the pages are bundled. Must not hold anything that the product does: only what keeps the first load small.
const path = require('node:path');
const { getDefaultConfig } = require('expo/metro-config');

const config = getDefaultConfig(__dirname);

// Metro keeps everything that is imported, and zod imports its messages in 50 languages. Rampwell's words for a refused
// field come from locales/, so one language is enough: measured 274 kB less JavaScript, 41 kB less on the wire.
const zodLocales = /[\\/]zod[\\/].*[\\/]locales[\\/]index\.(c?js)$/;
const resolveByDefault = config.resolver.resolveRequest;
config.resolver.resolveRequest = (context, moduleName, platform) => {
  const found = (resolveByDefault ?? context.resolveRequest)(context, moduleName, platform);
  if (found.type === 'sourceFile' && zodLocales.test(found.filePath)) {
    return { ...found, filePath: path.join(path.dirname(found.filePath), `en${path.extname(found.filePath)}`) };
  }
  return found;
};

// Only what the browser runs is watched and hashed; the server's data folder changes all the time.
config.resolver.blockList = [config.resolver.blockList, /[\\/]\.rampwell[\\/].*/].flat();

module.exports = config;
