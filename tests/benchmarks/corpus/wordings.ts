/**
 * What the made sheets say, and in which types: two halves that share neither wordings nor fonts. The engine is tuned on `tuning` alone;
 * figures are reported on `report`. Plain greetings, invented for the corpus.
 */
import type { FontName } from './lettering.ts';

export type Half = 'tuning' | 'report';

export interface Vocabulary {
  fonts: readonly FontName[];
  /** Lines of one sentiment are parted by |. */
  wordings: readonly string[];
}

export const vocabulary: Record<Half, Vocabulary> = {
  tuning: {
    fonts: ['lora', 'great-vibes', 'oswald', 'pacifico', 'quicksand', 'amatic-sc', 'cinzel', 'kalam', 'caveat'],
    wordings: [
      'Happy Birthday', 'happy|birthday|to you', 'Thank you', 'THANK YOU|so much', 'With love', 'Just because', 'Thinking of you', 'Get well soon',
      'hello', 'Congratulations', 'You did it!', 'Best wishes|on your|wedding day', 'With deepest|sympathy', 'Merry & Bright', 'Season’s|Greetings', 'Love you',
      'a little note', 'Hugs & kisses', 'For you', 'To: From:', 'it’s a girl', 'Welcome|little one', 'MISS YOU', 'You are|my sunshine', 'Cheers!', 'Let’s|celebrate',
      'Sending a|great big hug|your way', 'xoxo', 'Happy|Anniversary', 'Enjoy every moment', 'I am so|sorry', 'GOOD LUCK', 'hip hip hooray', 'Yay!', 'hi',
    ],
  },
  report: {
    fonts: ['dancing-script', 'playfair-display', 'josefin-sans', 'work-sans', 'courgette', 'fredoka', 'raleway', 'sacramento', 'satisfy', 'shadows-into-light'],
    wordings: [
      'Many happy|returns', 'Make a wish', 'Birthday girl', 'Thanks a bunch', 'I appreciate|you', 'Forever & always', 'Be mine', 'You’re invited', 'Hello there',
      'In loving|memory', 'Our thoughts|are with|you', 'Joy to|the world', 'Warm winter|wishes', 'HAPPY EASTER', 'New home', 'Well done', 'so proud|of you', 'Happily|ever after',
      'Baby shower', 'Oh boy', 'Feel better', 'You’ve got this', 'Hang in there', 'Friends are|flowers that|never fade', 'Smile', 'just for fun', 'ONE & ONLY', 'Wish you|were here',
      'Thankful', 'On your|special day', 'Bon voyage', 'Happy|Mother’s Day', 'Best Dad', 'yes!', 'Sweet treats',
    ],
  },
};
