/** One invented person a role; the sign-in page of a demo system lists them, a real system never does. */
export const demoAccounts = [
  ['ada.quill', 'Ada Quill', 'administrator'],
  ['petra.inkwell', 'Petra Inkwell', 'principal investigator, both studies'],
  ['ivo.varro', 'Ivo Varro', 'coordinator, both studies'],
  ['cora.tallow', 'Cora Tallow', 'coordinator, SCREEPATH, site Tarn Nook only'],
  ['tove.okoro-lind', 'Tove Okoro-Lind', 'unblinded technician, both studies'],
  ['dario.fenwick', 'Dario Fenwick-Moss', 'study physician, both studies'],
  ['bela.ferreol', 'Bela Ferreol', 'statistician, both studies'],
  ['mina.ostler', 'Mina Ostler', 'monitor, both studies'],
].map(([local, name, roles]) => ({
  email: `${local}@example.test`,
  password: `${local} walks the gravel path`,
  name: name as string,
  roles: roles as string,
}));
