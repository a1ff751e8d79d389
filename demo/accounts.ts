/** One password for all accounts of the demonstration; it is printed at every start. */
export const demonstrationPassword = 'half of it goes straight on';

/** A person of the demonstration. Everybody here is invented. */
export interface DemonstrationPerson {
  readonly name: string;
  readonly email: string;
  readonly role: 'administrator' | 'lead' | 'marker' | 'student';
}

const domain = 'halvik.example';

function person(name: string, role: DemonstrationPerson['role']): DemonstrationPerson {
  const [first = '', ...others] = name
    .toLowerCase()
    .normalize('NFD')
    .replace(/\p{M}/gu, '')
    .replaceAll('ø', 'o')
    .replaceAll('å', 'a')
    .split(/[^a-z]+/)
    .filter(Boolean);
  return { name, role, email: `${first}.${others.join('')}@${domain}` };
}

export const administrator = person('Runa Estvold', 'administrator');
export const lead = person('Maren Quill', 'lead');
export const markers = [
  person('Idris Varga', 'marker'),
  person('Solvei Brandt', 'marker'),
  person('Teodor Lindqvist', 'marker'),
  person('Amara Osei', 'marker'),
] as const;

const givenNames = [
  'Alva', 'Bela', 'Cato', 'Dagny', 'Emre', 'Freya', 'Goran', 'Hedda', 'Ilya', 'Jorun', 'Kaja', 'Leif', 'Mina', 'Nils',
  'Oda', 'Pavel', 'Ronja', 'Sami', 'Tuva', 'Ulla', 'Viggo', 'Wanda', 'Yusuf', 'Zora',
]; // prettier-ignore
const familyNames = [
  'Aas', 'Bakke', 'Castell', 'Dorn', 'Ekeland', 'Fjeld', 'Granholm', 'Hovde', 'Iversby', 'Juhl', 'Kaland', 'Lunde',
  'Mohn', 'Nygard', 'Orre', 'Pihl', 'Rusten',
]; // prettier-ignore

/** How many students the course has. */
export const studentCount = 118;

/** The students: every given name with family names that differ, 118 in all. */
export const students: readonly DemonstrationPerson[] = Array.from({ length: studentCount }, (_, index) => {
  const given = givenNames[index % givenNames.length] ?? '';
  const family = familyNames[(index * 5 + Math.floor(index / givenNames.length)) % familyNames.length] ?? '';
  return person(`${given} ${family}`, 'student');
});

/** The accounts that are printed at the start: one of each role, and a second marker. */
export const demonstrationAccounts = [lead, markers[0], markers[1], students[0], administrator]
  .filter((each) => each !== undefined)
  .map((each) => ({ ...each, password: demonstrationPassword }));
