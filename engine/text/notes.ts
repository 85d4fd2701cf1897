/**
 * What a transcriber writes in round brackets about the recording rather than from it. Square,
 * curly and angle brackets always hold such a note; round ones may hold speech, so they are a note
 * only where one of these beginnings stands among few words, or nothing but figures and dots.
 */
const beginnings = `
  laugh chuckl giggl crying cries cry sob sigh cough pause silence silent inaudible unclear unintell
  indistinct crosstalk overlap interrupt inhal exhal whisper sniff throat snort applause music
  lacht lachen gelächter weint seufz unverständ schweig stille räusper husten hustet
  rire rires rit pleur soupir inaudible incompréhens toux
  risa risas ríe ríen llora suspir pausa silencio ininteligible inaudible tose
  ride ridono risata piang sospir incomprensib silenzio
  lachend gelach zucht onverstaan stilte huilt
  riso risos ri chora inaudív suspira
  latter ler gråter sukker uhørbar pause stillhet skratt suckar ohörbar tystnad paus
  смех смеётся смеется плачет вздых пауза неразборчиво
`
  .split(/\s+/)
  .filter((word) => word !== '');

const exact = new Set(['ri', 'ler', 'rit', 'cry', 'ride', 'rire', 'risa', 'paus']);
const exactWords = new Set(beginnings.filter((word) => exact.has(word)));
const openWords = beginnings.filter((word) => !exact.has(word));

const mostWords = 6;

/** Whether what stands between two round brackets is about the recording. */
export function isNote(inside: string): boolean {
  const words = inside.toLowerCase().match(/\p{L}[\p{L}\p{M}'’-]*/gu);
  if (words === null) return true;
  if (words.length > mostWords) return false;
  return words.some(
    (word) => exactWords.has(word) || openWords.some((beginning) => word.startsWith(beginning)),
  );
}
