import ts from "typescript";

/** One small change of a source file that some test should notice. */
export interface Mutant {
  readonly file: string;
  readonly line: number;
  readonly start: number;
  readonly end: number;
  readonly original: string;
  readonly replacement: string;
}

const OPERATORS: Readonly<Record<string, string>> = {
  "+": "-",
  "-": "+",
  "*": "/",
  "/": "*",
  "%": "*",
  "<": "<=",
  "<=": "<",
  ">": ">=",
  ">=": ">",
  "===": "!==",
  "!==": "===",
  "&&": "||",
  "||": "&&",
  "??": "&&",
  "+=": "-=",
  "-=": "+=",
  "*=": "/=",
  "/=": "*=",
  "<<": ">>",
  ">>": "<<",
  "&": "|",
};

/**
 * All mutants of a source text: changed operators and numbers, negated conditions, exchanged branches, lost signs.
 *
 * Text and messages stay: they are for people. So do types, imports and named limits in capitals.
 */
export function mutantsOf(file: string, text: string): Mutant[] {
  const source = ts.createSourceFile(file, text, ts.ScriptTarget.Latest, true);
  const found: Mutant[] = [];
  const add = (node: ts.Node, replacement: string) => {
    const [start, end] = [node.getStart(source), node.getEnd()];
    const line = source.getLineAndCharacterOfPosition(start).line + 1;
    found.push({ file, line, start, end, original: text.slice(start, end), replacement });
  };
  const visit = (node: ts.Node): void => {
    if (ts.isImportDeclaration(node) || ts.isTypeNode(node) || ts.isInterfaceDeclaration(node)) return;
    if (ts.isTemplateExpression(node) || isMessage(node) || isLimit(node)) return;
    if (ts.isBinaryExpression(node)) {
      const replacement = OPERATORS[node.operatorToken.getText(source)];
      if (replacement !== undefined) add(node.operatorToken, replacement);
    } else if (ts.isPrefixUnaryExpression(node)) {
      const { operator, operand } = node;
      if (operator === ts.SyntaxKind.ExclamationToken || operator === ts.SyntaxKind.MinusToken)
        add(node, operand.getText(source));
    } else if (ts.isNumericLiteral(node)) {
      add(node, String(Number(node.text) + 1));
    } else if (ts.isBigIntLiteral(node)) {
      add(node, `${BigInt(node.getText(source).slice(0, -1).replaceAll("_", "")) + 1n}n`);
    } else if (ts.isConditionalExpression(node)) {
      add(node.condition, `!(${node.condition.getText(source)})`);
    } else if (ts.isIfStatement(node)) {
      add(node.expression, `!(${node.expression.getText(source)})`);
    } else if (node.kind === ts.SyntaxKind.TrueKeyword) {
      add(node, "false");
    } else if (node.kind === ts.SyntaxKind.FalseKeyword) {
      add(node, "true");
    }
    ts.forEachChild(node, visit);
  };
  visit(source);
  return found;
}

/** The words of an error: calls of the checks, whose conditions are mutated where they stand. */
function isMessage(node: ts.Node): boolean {
  return ts.isNewExpression(node) && node.expression.getText().endsWith("Error");
}

function isLimit(node: ts.Node): boolean {
  return ts.isVariableDeclaration(node) && /^[A-Z][A-Z_0-9]+$/.test(node.name.getText());
}
