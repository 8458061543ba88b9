// What: `npm run check:words`. Every key that the code asks for has a sentence with the right placeholders, every sentence is
// asked for, and no English stands in the pages themselves. Must not: judge the sentences; people and tests do.
import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import ts from 'typescript';
import { root } from './ground/paths.mjs';

/** Keys built at run time in a way this script cannot read, as `namespace:start.of.key`, each with its reason. */
const asked = {
  'clearance:reason.': 'the server asks by the code of a reason (server/reasons.ts)',
  'errors:': 'the server asks by the code of a problem, a field or a layer (server/words.ts)',
  'mail:': 'the server asks by the kind of a mail (server/mail/render-mail.ts)',
  'participants:timeline.kind.': 'asked by kind and word of an entry (timeline-words.ts)',
  'common:errors.': 'asked by the code of a form issue (words-of-issue.ts)',
};

/** Props that people read or hear. */
const readProps = new Set([
  ...['label', 'title', 'placeholder', 'accessibilityLabel', 'accessibilityHint', 'aria-label', 'hint', 'alt'],
  ...['heading', 'detail', 'busyLabel', 'aria-description', 'aria-valuetext', 'aria-roledescription'],
]);
const pluralEnd = /(_ordinal)?_(zero|one|two|few|many|other)$/;
const hasLetter = /\p{L}/u;
const keyForm = /^(?:([a-zA-Z-]+):)?[\w-]+(\.[\w-]+)*$/;

const words = readWords(path.join(root, 'locales', 'en'));
const used = new Set();
const faults = [];

function readWords(folder) {
  const all = new Map();
  const walk = (namespace, value, at) => {
    if (typeof value === 'string') all.set(`${namespace}:${at}`, value);
    else for (const [name, inner] of Object.entries(value)) walk(namespace, inner, at ? `${at}.${name}` : name);
  };
  for (const file of readdirSync(folder).filter((name) => name.endsWith('.json'))) {
    walk(path.basename(file, '.json'), JSON.parse(readFileSync(path.join(folder, file), 'utf8')), '');
  }
  return all;
}

const namespaces = new Set([...words.keys()].map((key) => key.split(':')[0]));

/** All sentences a key can mean: itself, its plural forms, its contexts. */
function sentencesOf(key, { context = false } = {}) {
  return [...words.keys()].filter(
    (name) => name === key || name.replace(pluralEnd, '') === key || (context && name.startsWith(`${key}_`)),
  );
}

function say(file, node, text) {
  const { line } = file.getLineAndCharacterOfPosition(node.getStart(file));
  faults.push(`${path.relative(root, file.fileName)}:${line + 1}  ${text}`);
}

/** The strings an expression can be; a template gives its fixed parts around `*`. Undefined where it cannot be read. */
function* possible(node) {
  if (ts.isStringLiteralLike(node)) yield { node, text: node.text };
  else if (ts.isTemplateExpression(node)) {
    yield { node, text: [node.head.text, ...node.templateSpans.map((span) => span.literal.text)].join('*') };
  } else if (ts.isConditionalExpression(node)) {
    yield* possible(node.whenTrue);
    yield* possible(node.whenFalse);
  } else if (ts.isBinaryExpression(node) && /^(\?\?|\|\|)$/.test(node.operatorToken.getText())) {
    yield* possible(node.left);
    yield* possible(node.right);
  } else if (ts.isParenthesizedExpression(node) || ts.isAsExpression(node) || ts.isSatisfiesExpression(node)) {
    yield* possible(node.expression);
  } else if (ts.isArrayLiteralExpression(node)) {
    for (const element of node.elements) yield* possible(element);
  }
}

/** Names of the values given for placeholders; undefined when they cannot be read. */
function givenNames(options) {
  if (!options) return new Set();
  if (!ts.isObjectLiteralExpression(options)) return undefined;
  if (options.properties.some((property) => !property.name)) return undefined;
  return new Set(options.properties.map((property) => property.name.getText().replace(/['"]/g, '')));
}

function checkPlaceholders(file, node, sentences, given) {
  if (!given || given.has('returnObjects')) return;
  for (const name of sentences) {
    for (const [, placeholder] of words.get(name).matchAll(/\{\{-?\s*([\w]+)/g)) {
      if (!given.has(placeholder)) say(file, node, `"${name}" needs {{${placeholder}}}, which is not given.`);
    }
  }
}

function ask(file, call, namespacesHere) {
  const options = call.arguments[1];
  const given = givenNames(options);
  for (const { node, text } of possible(call.arguments[0])) {
    const candidates = text.includes(':') ? [text] : namespacesHere.map((namespace) => `${namespace}:${text}`);
    let found = [];
    for (const key of candidates) {
      if (key.includes('*')) {
        const form = new RegExp(
          `^${key
            .split('*')
            .map((part) => part.replace(/[.?^$()[\]{}|+\\]/g, '\\$&'))
            .join('.+')}(_\\w+)?$`,
        );
        found.push(...[...words.keys()].filter((name) => form.test(name)));
      } else {
        found.push(...sentencesOf(key, { context: given?.has('context') ?? true }));
        if (given?.has('returnObjects') ?? true)
          found.push(...[...words.keys()].filter((name) => name.startsWith(`${key}.`)));
      }
    }
    // A t whose namespace is not known here is looked up in all of them.
    if (found.length === 0)
      say(file, node, `No sentence for "${candidates.length === 1 ? candidates[0] : text}" in locales/en.`);
    found.forEach((name) => used.add(name));
    if (!text.includes('*') && candidates.length === 1) checkPlaceholders(file, node, found, given);
  }
}

/** Namespaces of `useTranslation('x')`, `useTranslation(['x', 'y'])`, `getFixedT(language, 'x')`; the first is meant. */
function namespaceOf(initializer) {
  if (!initializer || !ts.isCallExpression(initializer)) return undefined;
  const called = initializer.expression.getText().split('.').at(-1);
  if (called !== 'useTranslation' && called !== 'getFixedT') return undefined;
  const argument = initializer.arguments[called === 'getFixedT' ? 1 : 0];
  const named = argument ? [...possible(argument)].map(({ text }) => text) : ['common'];
  return named.length > 0 ? named.slice(0, 1) : undefined;
}

/** Local names that ask for words (t, or what it was renamed to), each with its namespaces. */
function askersIn(file) {
  const askers = [];
  const visit = (node) => {
    if (ts.isVariableDeclaration(node)) {
      const known = namespaceOf(node.initializer);
      const scope = ts.findAncestor(node, (outer) => ts.isFunctionLike(outer) || ts.isSourceFile(outer));
      if (known && ts.isIdentifier(node.name)) askers.push({ name: node.name.text, scope, namespaces: known });
      if (known && ts.isObjectBindingPattern(node.name)) {
        for (const element of node.name.elements) {
          if ((element.propertyName ?? element.name).getText() !== 't') continue;
          askers.push({ name: element.name.getText(), scope, namespaces: known });
        }
      }
    }
    ts.forEachChild(node, visit);
  };
  visit(file);
  return askers;
}

function namespacesFor(call, askers) {
  const name = call.expression.getText();
  if (!ts.isIdentifier(call.expression)) return /(^|\.)(t|i18n\.t)$/.test(name) ? [...namespaces] : undefined;
  for (let scope = call; scope; scope = scope.parent) {
    const asker = askers.find((one) => one.scope === scope && one.name === name);
    if (asker) return asker.namespaces;
  }
  // Handed in as an argument: its namespace is the caller's.
  return name === 't' ? [...namespaces] : undefined;
}

function looksLikeWords(text) {
  return hasLetter.test(text) && !(keyForm.test(text) && !/^[A-Z]/.test(text)) && !text.startsWith('/');
}

/** English in the pages: text between tags, and in props that people read. */
function checkLiteral(file, node) {
  if (ts.isJsxText(node) && hasLetter.test(node.text)) {
    say(file, node, `"${node.text.trim().slice(0, 40)}" stands in the page: put it into locales/en.`);
  }
  if (ts.isJsxExpression(node) && node.expression && !ts.isJsxAttribute(node.parent)) {
    for (const { node: literal, text } of possible(node.expression)) {
      if (hasLetter.test(text))
        say(file, literal, `"${text.slice(0, 40)}" stands in the page: put it into locales/en.`);
    }
  }
  if (ts.isJsxAttribute(node) && readProps.has(node.name.getText()) && node.initializer) {
    const value = ts.isJsxExpression(node.initializer) ? node.initializer.expression : node.initializer;
    for (const { node: literal, text } of value ? possible(value) : []) {
      if (hasLetter.test(text))
        say(file, literal, `${node.name.getText()}="${text.slice(0, 40)}": people read this, put it into locales/en.`);
    }
  }
  if (ts.isPropertyAssignment(node) && readProps.has(node.name.getText().replace(/['"]/g, ''))) {
    for (const { node: literal, text } of possible(node.initializer)) {
      if (looksLikeWords(text))
        say(file, literal, `${node.name.getText()}: "${text.slice(0, 40)}": people read this, put it into locales/en.`);
    }
  }
}

function checkFile(name) {
  const source = readFileSync(name, 'utf8');
  const file = ts.createSourceFile(name, source, ts.ScriptTarget.Latest, true);
  const isPage = /^(app|components)\b/.test(path.relative(root, name));
  const askers = askersIn(file);
  const visit = (node) => {
    if (ts.isCallExpression(node) && node.arguments.length > 0) {
      const here = namespacesFor(node, askers);
      if (here) ask(file, node, here);
    }
    // A key kept in a table and asked for later is written whole somewhere.
    if (ts.isStringLiteralLike(node) && keyForm.test(node.text)) {
      const key = node.text;
      const full = key.includes(':')
        ? [key]
        : key.includes('.')
          ? [...namespaces].map((namespace) => `${namespace}:${key}`)
          : [];
      const found = full.flatMap((one) => sentencesOf(one));
      found.forEach((one) => used.add(one));
      if (found.length === 0 && key.includes(':') && namespaces.has(key.split(':')[0]) && key.includes('.')) {
        say(file, node, `No sentence for "${key}" in locales/en.`);
      }
    }
    if (isPage) checkLiteral(file, node);
    ts.forEachChild(node, visit);
  };
  visit(file);
}

for (const folder of ['app', 'components', 'server', 'shared']) {
  for (const entry of readdirSync(path.join(root, folder), { recursive: true })) {
    if (/\.tsx?$/.test(entry) && !entry.endsWith('.d.ts')) checkFile(path.join(root, folder, entry));
  }
}

// A sentence may quote another one: $t(key).
for (const [name, sentence] of words) {
  for (const [, key] of sentence.matchAll(/\$t\(([\w:.-]+)/g)) {
    sentencesOf(key.includes(':') ? key : `${name.split(':')[0]}:${key}`).forEach((one) => used.add(one));
  }
}

const unused = [...words.keys()].filter(
  (name) => !used.has(name) && !Object.keys(asked).some((start) => name.startsWith(start)),
);
for (const name of unused) faults.push(`locales/en/${name.replace(':', '.json  ')}  nobody asks for this sentence.`);

if (faults.length > 0) {
  console.error(
    `${[...new Set(faults)].sort().join('\n')}\n\n${faults.length} ${faults.length === 1 ? 'fault' : 'faults'} in the words.`,
  );
  process.exit(1);
}
console.log(`${words.size} sentences, each asked for; none missing, none in the code.`);
