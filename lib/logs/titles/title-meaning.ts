import {
  AMBIGUOUS_TITLES,
  OTHER_WORDS,
  PLAIN_WORDS,
  PRESSURE_WORDS,
  TIME_SIDE_WORDS,
  TIME_WORDS,
  TITLE_WORDS,
} from "@/lib/logs/titles/title-words";

const UMLAUTS: Readonly<Record<string, string>> = { ä: "ae", ö: "oe", ü: "ue" };
const LETTERS: Readonly<Record<string, string>> = {
  ß: "ss",
  ł: "l",
  ø: "o",
  æ: "ae",
  đ: "d",
  ı: "i",
  λ: "lambda",
};

/** Words of a title in small letters without accents; capitals inside a word and digits after letters begin a new one. */
export function foldTitle(title: string): string {
  return title
    .normalize("NFKC")
    .replace(/(\p{Ll})(\p{Lu})/gu, "$1 $2")
    .toLowerCase()
    .replace(/[ßłøæđıλ]/g, (letter) => LETTERS[letter] ?? letter)
    .normalize("NFD")
    .replace(/\p{M}+/gu, "")
    .replace(/(\p{L})(\d)/gu, "$1 $2")
    .replace(/[^\p{L}\p{N}]+/gu, " ")
    .trim();
}

/** The phrases of a table entry, folded; an umlaut may be written with or without its dots, or as two letters. */
export function phrasesOf(entry: string): string[] {
  return entry
    .split(/[,;]/)
    .map((phrase) => phrase.trim())
    .filter((phrase) => phrase !== "")
    .flatMap((phrase) => {
      const spelled = phrase.toLowerCase().replace(/[äöü]/g, (letter) => UMLAUTS[letter] ?? letter);
      return spelled === phrase.toLowerCase() ? [foldTitle(phrase)] : [foldTitle(phrase), foldTitle(spelled)];
    });
}

/** Words of a phrase list, folded, to look one up. */
const wordSet = (entry: string) => new Set(phrasesOf(entry));
const PLAIN = wordSet(PLAIN_WORDS);
const OTHER = wordSet(OTHER_WORDS);
const TIMES = wordSet(TIME_WORDS);
const TIME_SIDES = wordSet(TIME_SIDE_WORDS);
const GAUGE = wordSet(PRESSURE_WORDS.gauge);
const ABSOLUTE = wordSet(PRESSURE_WORDS.absolute);

const MEANING = new Map<string, readonly string[]>();
for (const [meaning, entry] of Object.entries(TITLE_WORDS))
  for (const phrase of phrasesOf(entry)) MEANING.set(phrase, meaning.split(" "));
const AMBIGUOUS = new Map(
  Object.entries(AMBIGUOUS_TITLES).flatMap(([choice, entry]) =>
    phrasesOf(entry).map((title) => [title, choice] as const),
  ),
);
const LONGEST_PHRASE = 5;

/** Takes words off in phrases, the longest first; `take` says whether it knows one. Gives the words that none took. */
function takePhrases(words: readonly string[], take: (phrase: string) => boolean): string[] {
  const left: string[] = [];
  for (let at = 0; at < words.length; ) {
    let length = Math.min(LONGEST_PHRASE, words.length - at);
    while (length > 0 && !take(words.slice(at, at + length).join(" "))) length--;
    if (length === 0) left.push(words[at]);
    at += Math.max(1, length);
  }
  return left;
}

/** What the words of a title mean. */
export interface TitleMeaning {
  /** Meanings by the names of the word table, each once. */
  meanings: ReadonlySet<string>;
  /** Words that nobody knows. */
  unknown: readonly string[];
  /** True when a word says that it is not the measured quantity (a target, an error, a bound). */
  other: boolean;
  pressureReference: "absolute" | "gauge" | null;
}

/** Looks up the words of a folded title. */
export function meaningOf(folded: string): TitleMeaning {
  const meanings = new Set<string>();
  let other = false;
  let pressureReference: TitleMeaning["pressureReference"] = null;
  const unknown = takePhrases(folded === "" ? [] : folded.split(" "), (phrase) => {
    const found = MEANING.get(phrase);
    for (const meaning of found ?? []) meanings.add(meaning);
    if (OTHER.has(phrase)) other = true;
    if (GAUGE.has(phrase)) pressureReference = "gauge";
    else if (ABSOLUTE.has(phrase)) pressureReference ??= "absolute";
    const reference = GAUGE.has(phrase) || ABSOLUTE.has(phrase);
    return found !== undefined || reference || OTHER.has(phrase) || PLAIN.has(phrase) || /^\d+$/.test(phrase);
  });
  return { meanings, unknown, other, pressureReference };
}

/** What a folded title can be, where it has two meanings; else null. */
export function choiceOf(folded: string): string | null {
  return AMBIGUOUS.get(folded) ?? null;
}

/** True when every word of a folded title names a time or goes with one. */
export function isTimePhrase(folded: string): boolean {
  let named = false;
  const left = takePhrases(folded.split(" "), (phrase) => {
    if (TIMES.has(phrase)) named = true;
    return TIMES.has(phrase) || TIME_SIDES.has(phrase) || PLAIN.has(phrase);
  });
  return named && left.length === 0;
}
