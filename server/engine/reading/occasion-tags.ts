/**
 * What a sentiment is for, guessed from its words: a proposal that the person accepts or not.
 *
 * Input: the words in any case, with or without line breaks; English. Output: tags in the order of OCCASIONS, each once; none where nothing is known.
 * A word counts whole, so that “wed” in “showed” is no wedding. Pure, safe in the browser. Cost: the length of the words.
 */

export const OCCASIONS = [
  'birthday', 'thanks', 'love', 'wedding', 'anniversary', 'sympathy', 'get well', 'baby', 'congratulations', 'christmas', 'easter', 'mother’s day', 'father’s day',
  'new home', 'graduation', 'invitation', 'friendship', 'encouragement', 'farewell', 'greeting', 'gift tag',
] as const;
export type Occasion = (typeof OCCASIONS)[number];

/** Words or phrases; `*` stands for any ending. */
const SIGNS: Record<Occasion, readonly string[]> = {
  birthday: ['birthday*', 'b-day', 'bday', 'many happy returns', 'make a wish', 'hip hip hooray', 'another year'],
  thanks: ['thank*', 'thanks', 'grateful*', 'gratitude', 'appreciat*'],
  love: ['love*', 'valentine*', 'be mine', 'sweetheart*', 'kiss*', 'xoxo', 'adore*', 'hugs'],
  wedding: ['wedding*', 'bride*', 'groom', 'mr & mrs', 'mr and mrs', 'just married', 'happily ever after', 'newlyweds', 'engage*'],
  anniversary: ['anniversar*'],
  sympathy: ['sympath*', 'condolence*', 'loving memory', 'sorry for your loss', 'so sorry', 'thoughts are with', 'comfort', 'rest in peace', 'mourn*', 'healing'],
  'get well': ['get well', 'feel better', 'speedy recovery', 'well soon'],
  baby: ['baby*', 'little one', 'it’s a girl', 'it’s a boy', 'newborn', 'oh boy', 'bundle of joy'],
  congratulations: ['congrat*', 'well done', 'you did it', 'hooray', 'proud of you', 'good job', 'way to go', 'yay'],
  christmas: ['christmas', 'merry', 'season’s greetings', 'holiday*', 'noel', 'joy to the world', 'let it snow', 'winter wishes', 'santa', 'peace on earth'],
  easter: ['easter', 'bunny', 'he is risen'],
  'mother’s day': ['mother’s day', 'mum', 'mom', 'best mum', 'best mom', 'mother'],
  'father’s day': ['father’s day', 'dad', 'daddy', 'father'],
  'new home': ['new home', 'home sweet home', 'housewarming', 'new house'],
  graduation: ['graduat*', 'grad', 'class of', 'diploma'],
  invitation: ['you’re invited', 'you are invited', 'invit*', 'save the date', 'join us', 'rsvp', 'party'],
  friendship: ['friend*', 'bestie*'],
  encouragement: ['you’ve got this', 'you got this', 'hang in there', 'believe', 'good luck', 'be brave', 'keep going', 'dream big', 'stay strong', 'you can do it', 'my sunshine'],
  farewell: ['bon voyage', 'farewell', 'goodbye', 'miss you', 'safe travels', 'wish you were here'],
  greeting: ['hello', 'hi', 'hey', 'thinking of you', 'just because', 'a little note', 'just a note', 'best wishes', 'warm wishes', 'big hug', 'smile', 'cheers'],
  'gift tag': ['to from', 'from', 'for you', 'just for you', 'made for you', 'handmade', 'sweet treats', 'with love from', 'do not open'],
};

export function occasionTags(words: string): Occasion[] {
  const text = ` ${plain(words)} `;
  return OCCASIONS.filter((occasion) => SIGNS[occasion].some((sign) => holds(text, plain(sign.replace('*', '')), sign.endsWith('*'))));
}

/** Small letters and single spaces; apostrophes go, so that “it's” and “it’s” are one. */
function plain(text: string): string {
  return text.toLowerCase().normalize('NFKC').replace(/['’‘`]/g, '').replace(/[^\p{L}\p{N}&]+/gu, ' ').trim();
}

function holds(text: string, sign: string, anyEnding: boolean): boolean {
  return text.includes(anyEnding ? ` ${sign}` : ` ${sign} `);
}
