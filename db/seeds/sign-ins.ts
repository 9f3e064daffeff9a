/** A person of the demo, with a password that everybody may know: it exists on this machine only. */
export interface SignIn {
  role: string;
  name: string;
  email: string;
  password: string;
}

const person = (role: string, name: string, mailbox: string, password: string): SignIn => ({
  role,
  name,
  email: `${mailbox}@benchleaf.example`,
  password,
});

/** Who to sign in as in the demo. */
export const signIns: readonly SignIn[] = [
  person('author, owner', 'Wenna Aldous', 'wenna', 'shavings under the bench'),
  person('editor', 'Tomas Ferrier', 'tomas', 'dovetail before breakfast'),
  person('bookkeeper', 'Ida Brennholt', 'ida', 'columns that add up'),
  person('author, in inches', 'Rosalind Sato', 'rosalind', 'cherry darkens slowly'),
  person('buyer', 'Łukasz Ożóg', 'lukasz', 'narrow hall wet boots'),
  person('buyer, in inches', 'Marguerite Oyelaran', 'marguerite', 'two drawers one window'),
  person('proof builder', 'Bram Teasdale', 'bram', 'measure twice then again'),
  person('publisher’s staff', 'Pia Quillfeather', 'pia', 'ink frame and pencil'),
];
