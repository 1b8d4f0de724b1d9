/**
 * A line becomes a syntax tree. The grammar is that of mathjs, whose parser reads it; since its
 * nodes carry no positions, the tree is walked in reading order beside the tokens.
 */
import { create, parseDependencies } from 'mathjs/number'
import type { FactoryFunctionMap } from 'mathjs'
import { Fault, fault } from '../fault'
import { LIMITS } from '../limits'
import type { SourceRange } from '../types'
import { fromMathjs } from './align'
import type { Definition, Node, ParsedLine } from './node'
import { splitNote, tokenize } from './tokens'
import type { Token } from './tokens'
import { isReserved } from './words'

const { parse } = create(parseDependencies as FactoryFunctionMap)

/** Reads one line. Throws a Fault where it cannot be read. */
export function parseLine(source: string): ParsedLine {
  if (source.length > LIMITS.lineLength) throw fault('line-too-long', `This line has ${source.length} characters; ${LIMITS.lineLength} are the most.`, 'Split it into several lines.')
  const { text, note } = splitNote(source)
  const tokens = tokenize(text)
  const words = tokens.filter(token => token.type === 'word').map(token => token.text)
  const line: ParsedLine = { words, ...(note === undefined ? {} : { note }) }
  if (tokens.length === 0) return line
  checkForm(tokens)
  const { define, body } = splitDefinition(tokens)
  if (define) line.define = define
  return { ...line, ...readBody(body, define) }
}

/** The name that a line would define, also where the rest of it cannot be read. */
export function definedName(source: string): string | undefined {
  const match = /^\s*([\p{L}_][\p{L}\d_]*)\s*(?:\([^()]*\)\s*)?=(?!=)/u.exec(splitNote(source).text)
  return match?.[1]?.replace(/\u00B5/g, '\u03BC').replace(/\u2126/g, '\u03A9')
}

function readBody(tokens: Token[], define: Definition | undefined): Pick<ParsedLine, 'body' | 'tolerance' | 'toleranceUnit'> {
  const signs = tokens.flatMap((token, index) => token.text === '±' ? [index] : [])
  const [first, second] = signs
  if (first === undefined) return { body: parseTokens(tokens) }
  const at = tokens[first]?.at
  if (second !== undefined) throw fault('tolerance-twice', 'Only one ± may stand in a line.', 'Give each value with a tolerance a line of its own.', tokens[second]?.at)
  if (depthAt(tokens, first) > 0 || define?.parameters) {
    throw fault('tolerance-place', '± stands once, at the top of a definition: `name = nominal ± t`.', 'Give the value with its tolerance a name on a line of its own, and use that name.', at)
  }
  if (first === 0 || first === tokens.length - 1) throw fault('tolerance-place', 'Something is missing beside ±.', 'Write `name = nominal ± t`, such as `R = 4.7 kohm ± 5 %`.', at)
  const body = parseTokens(tokens.slice(0, first))
  const right = parseTokens(tokens.slice(first + 1))
  for (const side of [body, right]) {
    if (side.type === 'compare' || side.type === 'choice') throw fault('tolerance-place', '± belongs to a single value.', 'Write `name = nominal ± t` on a line of its own.', side.at)
  }
  if (body.type === 'to') throw fault('tolerance-place', '`to` stands at the end, after the tolerance.', 'Write `name = nominal ± t to unit`.', body.at)
  return right.type === 'to' ? { body, tolerance: right.value, toleranceUnit: right.unit } : { body, tolerance: right }
}

function depthAt(tokens: Token[], index: number): number {
  let depth = 0
  for (const token of tokens.slice(0, index)) depth += opens(token) ? 1 : closes(token) ? -1 : 0
  return depth
}

const opens = (token: Token) => token.type === 'sign' && (token.text === '(' || token.text === '[')
const closes = (token: Token) => token.type === 'sign' && (token.text === ')' || token.text === ']')

/** `name = …` and `f(x, …) = …`. */
function splitDefinition(tokens: Token[]): { define?: Definition, body: Token[] } {
  const equals = tokens.findIndex(token => token.text === '=')
  if (equals < 0) return { body: tokens }
  const again = tokens.slice(equals + 1).find(token => token.text === '=')
  if (again) throw fault('second-equals', 'A line defines one name, with one `=`.', 'Give each definition a line of its own; a comparison is `<=` or `>=`.', again.at)
  const [name, ...rest] = tokens.slice(0, equals)
  const at = tokens[equals]?.at
  if (name?.type !== 'word') throw fault('definition-form', 'A definition starts with a name: `name = …`.', 'Letters, digits and `_`, beginning with a letter.', name?.at ?? at)
  const body = tokens.slice(equals + 1)
  if (body.length === 0) throw fault('definition-form', `\`${name.text}\` is given no value.`, `Write \`${name.text} = …\`.`, at)
  refuseReserved(name)
  if (rest.length === 0) return { define: { name: name.text, at: name.at }, body }
  return { define: { name: name.text, at: name.at, parameters: readParameters(name, rest) }, body }
}

function refuseReserved(token: Token): void {
  if (!isReserved(token.text)) return
  throw fault('reserved-name', `\`${token.text}\` has a fixed meaning and cannot be defined.`, `Choose another name, such as \`${token.text}_1\`.`, token.at)
}

function readParameters(name: Token, rest: Token[]): { name: string, at: SourceRange }[] {
  const parameters: { name: string, at: SourceRange }[] = []
  const wrong = (token: Token | undefined) => fault('definition-form', 'The left side of `=` is a name, or a function of names: `f(x) = …`.', 'Move everything else to the right side.', token?.at ?? name.at)
  if (rest[0]?.text !== '(' || rest.at(-1)?.text !== ')') throw wrong(rest[0])
  rest.slice(1, -1).forEach((token, index) => {
    if (index % 2 === 1) {
      if (token.text !== ',') throw wrong(token)
      return
    }
    if (token.type !== 'word') throw wrong(token)
    if (token.text !== 's') refuseReserved(token)
    if (parameters.some(parameter => parameter.name === token.text)) throw fault('definition-form', `\`${token.text}\` stands twice among the parameters.`, 'Give each parameter its own name.', token.at)
    parameters.push({ name: token.text, at: token.at })
  })
  if (rest.length % 2 === 0 || parameters.length === 0) throw wrong(rest.at(-1))
  if (parameters.length > 1 && parameters.some(parameter => parameter.name === 's')) {
    throw fault('definition-form', 'A transfer function has the one parameter `s`.', 'Write `H(s) = …`, and use the other values by their names.', parameters[0]?.at)
  }
  return parameters
}

/** What mathjs would accept or refuse without a word that helps. */
function checkForm(tokens: Token[]): void {
  const stack: Token[] = []
  tokens.forEach((token, index) => {
    if (opens(token)) stack.push(token)
    if (stack.length > LIMITS.depth) throw fault('too-deep', 'The brackets of this line are nested too deeply.', 'Give parts of it lines and names of their own.', token.at)
    if (closes(token)) closeBracket(stack, token)
    if (token.text === ':' && token.type === 'sign' && !tokens.slice(0, index).some(before => before.text === '?')) throw fault('range', 'A colon has no meaning here.', 'A range of frequencies is `band(f_1, f_2)`; a list is `[a, b, c]`.', token.at)
    refuseNeighbours(tokens[index - 1], token, tokens[index + 1], stack)
  })
  const open = stack[0]
  if (open) throw fault('bracket', `This \`${open.text}\` is not closed.`, `Add the missing \`${open.text === '(' ? ')' : ']'}\`.`, open.at)
}

function closeBracket(stack: Token[], token: Token): void {
  const open = stack.pop()
  if (open?.text !== (token.text === ')' ? '(' : '[')) throw fault('bracket', `This \`${token.text}\` has no partner.`, 'Every bracket is opened and closed.', token.at)
}

function refuseNeighbours(before: Token | undefined, token: Token, after: Token | undefined, stack: Token[]): void {
  if (before?.type === 'number' && token.type === 'number') throw fault('two-numbers', 'Two numbers stand side by side.', 'Write large numbers without spaces (`10000`), and a product with `*`.', { from: before.at.from, to: token.at.to })
  if (token.text === ',' && before?.type === 'number' && after?.type === 'number' && stack.length === 0) {
    throw fault('decimal-comma', 'Decimals are written with a point.', `Write \`${before.text}.${after.text}\`.`, { from: before.at.from, to: after.at.to })
  }
  if (token.text === ',' && stack.length === 0) throw fault('comma', 'A comma stands only between the arguments of a function or the items of a list.', 'Decimals are written with a point.', token.at)
  if (token.text === '[' && before && (before.type === 'word' || before.text === ')' || before.text === ']')) throw fault('index', 'Items are not taken from a list by number.', 'Give each value a line and a name of its own.', token.at)
  if (token.text === '[' && stack.length > 1 && stack.at(-2)?.text === '[') throw fault('matrix', 'A list holds single values, not lists.', 'Write `[a, b, c]`.', token.at)
  if (token.text === '+' && (before === undefined || (before.type === 'sign' && !closes(before)))) {
    throw fault('unary-plus', 'A sign + before a value has no meaning.', 'Leave the + out; a tolerance is `±`.', token.at)
  }
}

/** Runs mathjs's parser on a stretch of tokens and gives the tree its places. */
function parseTokens(tokens: Token[]): Node {
  const starts: number[] = []
  let text = ''
  for (const token of tokens) {
    text += text === '' ? '' : ' '
    starts.push(text.length)
    text += token.text
  }
  try {
    return fromMathjs(parse(text), tokens)
  }
  catch (error) {
    if (error instanceof Fault) throw error
    throw unreadable(error, tokens, starts)
  }
}

function unreadable(error: unknown, tokens: Token[], starts: number[]): Fault {
  const where = error instanceof SyntaxError && 'char' in error && typeof error.char === 'number' ? error.char - 1 : -1
  const index = starts.findLastIndex(start => start <= where)
  const token = tokens[index < 0 ? tokens.length - 1 : index]
  if (token && where >= 0 && where < (starts.at(-1) ?? 0) + (tokens.at(-1)?.text.length ?? 0)) {
    return fault('syntax', `\`${token.text}\` cannot stand here.`, 'Check what is before it: an operator, a bracket or a value is missing.', token.at)
  }
  return fault('syntax', 'Something is missing at the end of this line.', 'Finish the expression after its last operator.', tokens.at(-1)?.at)
}
