/**
 * Labels that say what somebody is in the conversation, not who it is: such a label names another
 * person in every transcript.
 */
const roleLabels = new Set(
  [
    'participant, interviewee, respondent, informant, speaker, person, subject, guest, answer',
    'teilnehmer, teilnehmerin, befragte, befragter, person, sprecher, sprecherin',
    'participante, entrevistado, entrevistada, persona, hablante',
    'participant, participante, enquêté, enquêtée, interviewé, interviewée, locuteur, locutrice',
  ]
    .join(', ')
    .split(', '),
);

/**
 * Who a participant's label stands for. A name or code ("P07", "Maria Lopez") is the same person in
 * every transcript of the study; a role, a numbered role or a single letter is a person of this
 * transcript alone.
 */
export function participantName(
  label: string | null,
  transcript: string,
  participantLabels: number,
): string {
  if (label !== null && !isRole(label)) return label;
  return participantLabels === 1 || label === null ? transcript : `${transcript}, ${label}`;
}

function isRole(label: string): boolean {
  const plain = label.normalize('NFC').toLowerCase().trim();
  return plain.length === 1 || roleLabels.has(plain.replace(/\s*#?\d+$/u, ''));
}
