import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';

const components = fileURLToPath(new URL('../../components/', import.meta.url));

/** Attributes that people read or hear. */
const spokenAttributes = new Set(['aria-label', 'title', 'placeholder', 'label', 'hint', 'alt']);
const hasLetter = /\p{Letter}/u;

/** Every text of a component that people would read and that comes from no catalogue, as "file:line: text". */
function literalsIn(file: string, code: string): string[] {
  const source = ts.createSourceFile(file, code, ts.ScriptTarget.Latest, true, ts.ScriptKind.TSX);
  const found: string[] = [];
  const note = (node: ts.Node, text: string) => {
    if (!hasLetter.test(text)) return;
    const { line } = source.getLineAndCharacterOfPosition(node.getStart(source));
    found.push(`${file}:${line + 1}: ${text.trim()}`);
  };
  const visit = (node: ts.Node): void => {
    if (ts.isJsxText(node)) note(node, node.text);
    else if (ts.isJsxAttribute(node) && spokenAttributes.has(node.name.getText(source))) {
      for (const text of textsOf(node.initializer)) note(text, text.text);
    } else if (ts.isJsxExpression(node) && !ts.isJsxAttribute(node.parent)) {
      for (const text of textsOf(node)) note(text, text.text);
    }
    ts.forEachChild(node, visit);
  };
  visit(source);
  return found;
}

type Text =
  | ts.StringLiteral
  | ts.NoSubstitutionTemplateLiteral
  | ts.TemplateHead
  | ts.TemplateMiddle
  | ts.TemplateTail;

/** The literals that an expression can come to. Arguments of calls and sides of comparisons are no text on a page. */
function textsOf(node: ts.Node | undefined): Text[] {
  if (!node) return [];
  if (ts.isStringLiteral(node) || ts.isNoSubstitutionTemplateLiteral(node)) return [node];
  if (ts.isTemplateExpression(node))
    return [node.head, ...node.templateSpans.flatMap((span) => [...textsOf(span.expression), span.literal])];
  if (ts.isJsxExpression(node) || ts.isParenthesizedExpression(node)) return textsOf(node.expression);
  if (ts.isConditionalExpression(node)) return [...textsOf(node.whenTrue), ...textsOf(node.whenFalse)];
  if (ts.isBinaryExpression(node)) {
    const either = [ts.SyntaxKind.PlusToken, ts.SyntaxKind.BarBarToken, ts.SyntaxKind.QuestionQuestionToken];
    if (either.includes(node.operatorToken.kind)) return [...textsOf(node.left), ...textsOf(node.right)];
    if (node.operatorToken.kind === ts.SyntaxKind.AmpersandAmpersandToken) return textsOf(node.right);
  }
  return [];
}

describe('words for people come from the catalogues (common practice, no source)', () => {
  it('in every component', () => {
    const files = readdirSync(components, { recursive: true, encoding: 'utf8' }).filter((file) =>
      file.endsWith('.tsx'),
    );
    expect(files).toContain(path.join('board', 'Board.tsx'));
    expect(
      files.flatMap((file) => literalsIn(file, readFileSync(path.join(components, file), 'utf8'))),
    ).toEqual([]);
  });

  it.each([
    ['<p>Nothing waits</p>', 'Nothing waits'],
    ['<p>\n {count} días\n</p>', 'días'],
    ['<input placeholder="Why?" />', 'Why?'],
    ["<Field label={late ? 'Late' : words.early} />", 'Late'],
    [`<b aria-label={\`\${count} of them\`} />`, 'of them'],
    ["<p>{count > 1 && ' to ' + day}</p>", 'to'],
    ["<p>{name ?? 'Nobody'}</p>", 'Nobody'],
  ])('finds the text in %s', (code, text) => {
    expect(literalsIn('One.tsx', `const one = ${code};`)).toEqual([
      expect.stringMatching(new RegExp(`^One\\.tsx:\\d: ${text.replace('?', '\\?')}$`)),
    ]);
  });

  it('names the line, of text by its beginning', () => {
    expect(literalsIn('One.tsx', 'const one = (\n  <b\n    title="Two"\n  />\n);')).toEqual([
      'One.tsx:3: Two',
    ]);
    expect(literalsIn('One.tsx', 'const one = (\n  <b>\n    Two\n  </b>\n);')).toEqual(['One.tsx:3: Two']);
  });

  it.each([
    '<p className="text-sm">{words.none}{" · "}12</p>',
    '<p>{kind === \'pour\' && words.of("crew")}</p>',
    '<Row name="area" title={names("crew", id)} />',
    '<p>{words["none"]}: <b>·</b></p>',
  ])('lets %s be', (code) => {
    expect(literalsIn('One.tsx', `const one = ${code};`)).toEqual([]);
  });
});
