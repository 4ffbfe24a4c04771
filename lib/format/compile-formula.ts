type Evaluate = (x: number) => number;

const FUNCTIONS: Readonly<Record<string, (...values: number[]) => number>> = {
  abs: Math.abs,
  sqrt: Math.sqrt,
  exp: Math.exp,
  sin: Math.sin,
  cos: Math.cos,
  tan: Math.tan,
  asin: Math.asin,
  acos: Math.acos,
  atan: Math.atan,
  sinh: Math.sinh,
  cosh: Math.cosh,
  tanh: Math.tanh,
  ln: Math.log,
  log10: Math.log10,
  pow: (base, exponent) => base ** exponent,
};
const TOKEN = /\s*(?:(\d+\.?\d*(?:e[+-]?\d+)?|\.\d+(?:e[+-]?\d+)?)|([a-z]\w*)|([-+*/(),]))/iy;
const DEEPEST = 50;
/** No sensor's curve is longer; a made-up formula must not claim time for every value of a log. */
const MOST_TOKENS = 128;

/**
 * Compiles a conversion formula of one variable, X or X1: numbers, + − * /, brackets, abs, sqrt, exp, ln, log10, pow and
 * the circular and hyperbolic functions (radians). Null for anything else: what a caret or a bare "log" means differs between
 * writers, so those are not guessed.
 */
export function compileFormula(text: string): Evaluate | null {
  const tokens: string[] = [];
  TOKEN.lastIndex = 0;
  const source = text.trimEnd();
  while (TOKEN.lastIndex < source.length) {
    const match = TOKEN.exec(source);
    if (!match || tokens.length >= MOST_TOKENS) return null;
    tokens.push((match[1] ?? match[2] ?? match[3]).toLowerCase());
  }
  let at = 0;
  const take = (token: string) => tokens[at] === token && ++at > 0;

  const primary = (depth: number): Evaluate | null => {
    const token = tokens[at++];
    if (token === undefined || depth > DEEPEST) return null;
    if (/^[\d.]/.test(token)) {
      const value = Number(token);
      return () => value;
    }
    if (token === "x" || token === "x1") return (x) => x;
    if (token === "-") {
      const inner = primary(depth + 1);
      return inner && ((x) => -inner(x));
    }
    if (token === "+") return primary(depth + 1);
    if (token === "(") {
      const inner = sum(depth + 1);
      return inner && take(")") ? inner : null;
    }
    return Object.hasOwn(FUNCTIONS, token) && take("(") ? call(token, depth) : null;
  };
  const call = (name: string, depth: number): Evaluate | null => {
    const first = sum(depth + 1);
    if (!first) return null;
    const work = FUNCTIONS[name];
    if (name !== "pow") return take(")") ? (x) => work(first(x)) : null;
    const second = take(",") ? sum(depth + 1) : null;
    return second && take(")") ? (x) => work(first(x), second(x)) : null;
  };
  const chain = (
    operand: (depth: number) => Evaluate | null,
    operators: Readonly<Record<string, (a: number, b: number) => number>>,
  ) => {
    return (depth: number): Evaluate | null => {
      let left = operand(depth);
      while (left && Object.hasOwn(operators, tokens[at] ?? "")) {
        const work = operators[tokens[at++]];
        const [a, b]: [Evaluate, Evaluate | null] = [left, operand(depth)];
        left = b && ((x) => work(a(x), b(x)));
      }
      return left;
    };
  };
  const product = chain(primary, { "*": (a, b) => a * b, "/": (a, b) => a / b });
  const sum = chain(product, { "+": (a, b) => a + b, "-": (a, b) => a - b });
  const compiled = sum(0);
  return compiled && at === tokens.length ? compiled : null;
}
