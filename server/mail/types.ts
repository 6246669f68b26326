/** Post to people. Plain text only: nothing to click but links that are spelt out. */
export interface Letter {
  to: string;
  subject: string;
  text: string;
}

export interface Mail {
  /** Rejects where the mail server does not take it. */
  send(letter: Letter): Promise<void>;
}
