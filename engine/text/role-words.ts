/** Labels that name the one who asks: whole words in the languages that we have lists for. */
const interviewers = words(`
  interviewer interviewers interviewing moderator facilitator researcher host questioner
  interviewerin moderatorin forscher forscherin interviewleiter interviewleiterin frage
  enquêteur enquêtrice enqueteur enquetrice intervieweur intervieweuse animateur animatrice
  modérateur modératrice chercheur chercheuse
  entrevistador entrevistadora encuestador encuestadora moderador moderadora investigador
  investigadora pesquisador pesquisadora
  intervistatore intervistatrice moderatore moderatrice ricercatore ricercatrice
  onderzoeker vraagsteller
  intervjuer intervjueren intervjuare intervjuaren moderatorn forsker forskeren forskare forskaren
  интервьюер модератор исследователь ведущий
`);

/** Short forms of these, which count only in capitals or with a number. */
const interviewerCodes = words('int intv iv i ir iver mod fac q f');

/** Labels that name the one who answers or any speaker. */
const others = words(`
  interviewee participant respondent informant subject patient client speaker unknown male female
  man woman answer question several all everyone both group child observer assistant interpreter
  translator
  befragte befragter teilnehmer teilnehmerin sprecher sprecherin person antwort
  interviewé interviewée participante répondant répondante locuteur locutrice personne
  entrevistado entrevistada participante hablante persona respuesta pregunta
  intervistato intervistata partecipante
  geïnterviewde deelnemer spreker respondente informante falante
  deltager deltaker deltagare informant respondent
  участник участница респондент
`);

/** In front of a transcript these say something about it; they never speak. */
const headings = words(`
  date time place location venue setting site transcript transcription transcribed transcriber
  recording recorded recordist file filename duration length project study title subject topic
  notes note nb summary abstract context background language version status audio video interview
  id code mode age gender sex occupation profession job role village town city country region
  attendees attending present participants interviewers speakers key legend conventions
  confidentiality consent name pseudonym number no page appendix source copyright draft checked
  start end started ended total words keywords description information details group wave phase
  datum ort zeit dauer thema aufnahme transkript transkription sprache teilnehmende alter
  geschlecht beruf anmerkung hinweis titel projekt
  lieu durée sujet enregistrement langue âge sexe titre projet remarque
  fecha lugar hora duración tema grabación transcripción idioma edad sexo título proyecto nota
  data luogo durata registrazione trascrizione lingua età titolo progetto
  plaats duur onderwerp opname taal leeftijd
  local duração gravação transcrição idade
  dato sted varighet emne opptak språk alder plats längd ämne inspelning ålder kön
  дата место время тема язык возраст
`);

/** Words that begin a line of speech before a colon but are nobody's name. */
const speechOpeners = words(`
  and or but so because then now well ok okay yes yeah yep no nope right look listen see anyway
  honestly actually basically seriously literally obviously first firstly second secondly third
  thirdly fourth last lastly finally next again also plus maybe perhaps still however therefore
  otherwise instead meanwhile example reason result problem problems solution point thing things
  fact truth idea issue lesson rule rules moral conclusion verdict bottom short simple remember
  imagine think take warning careful caution sorry please thanks hello hi hey welcome goodbye ps
  the a an this that these those there here it he she they we you me us him her them his their our
  my your its who what when where why how which if as at in on by for from to of with about before
  after since until while during every each any some all both either neither same only just even
  like not never always sometimes today tomorrow yesterday tonight monday tuesday wednesday thursday
  friday saturday sunday january february march april june july august september october november
  december morning afternoon evening night winter spring summer autumn said says say told asked
  nota bene nb ok pps fyi eg ie tv
  und oder aber also dann jetzt ja nein gut genau erstens zweitens drittens beispiel problem der die
  das ein eine es er sie wir ihr ich du wenn weil denn noch nur wie was wer wo warum heute gestern
  et ou mais donc alors oui non bon exemple problème le la les un une il elle nous vous je tu si car
  comme quand où pourquoi premièrement deuxièmement
  y o pero entonces sí bueno ejemplo problema el los las una yo él ella nosotros si cuando donde
  porque primero segundo
  e ma allora sì bene esempio lo gli io lui lei noi se quando dove perché
  en maar dus dan ja nee goed voorbeeld probleem het een ik hij zij wij als omdat
  og men så nei eksempel jeg han hun vi hvis när där och jag hon exempel
`);

const numbered = String.raw`(?:[\s_.#-]*\d{1,4}|[\s_.#-]+\p{Lu})?`;
const bracketed = String.raw`(?:\s*[([][^()[\]]*[)\]])?`;
const afterWord = new RegExp(`^([\\p{L}\\p{M}-]+?)${numbered}${bracketed}$`, 'u');

function words(list: string): ReadonlySet<string> {
  return new Set(list.split(/\s+/).filter((word) => word !== ''));
}

/** The word of a label without its number or brackets: "Interviewer 2" -> "Interviewer". */
function headWord(label: string): string {
  return afterWord.exec(label.normalize('NFC').trim())?.[1] ?? '';
}

/** 'word' for "Interviewer 1", 'code' for "INT" or "I2", null where a label says no such thing. */
export function interviewerLabel(label: string): 'word' | 'code' | null {
  const head = headWord(label);
  if (interviewers.has(head.toLowerCase())) return 'word';
  const isCode = interviewerCodes.has(head.toLowerCase());
  const numberBehind = /\d/.test(label);
  return isCode && (head === head.toUpperCase() || numberBehind) ? 'code' : null;
}

/** Whether a label is the word for a part in an interview, in any of the languages. */
export function isRoleWord(label: string): boolean {
  const head = headWord(label).toLowerCase();
  return interviewers.has(head) || others.has(head);
}

export function isRoleCode(label: string): boolean {
  return interviewerLabel(label) === 'code';
}

/** Whether what stands before a colon is a heading of the transcript ("Date", "Interview no."). */
export function isHeading(label: string): boolean {
  const parts = label
    .toLowerCase()
    .normalize('NFC')
    .split(/[^\p{L}\p{M}]+/u);
  const first = parts.find((part) => part !== '');
  if (first === undefined || !headings.has(first)) return false;
  // "Subject 2" and "Group 1" may speak; "Date" and "Interview 3" do not.
  return !(others.has(first) && /\d/.test(label));
}

/** Whether a label begins with a word that opens speech rather than names somebody. */
export function isSpeechOpener(label: string): boolean {
  const first = /^[\p{L}\p{M}]+/u.exec(label.normalize('NFC'))?.[0].toLowerCase() ?? '';
  if (!speechOpeners.has(first)) return false;
  // Single capital letters are codes: "A" and "I" are in the lists above as words.
  return !/^\p{Lu}(?:[-_ ]?\d+)?$/u.test(label);
}
