/** The invented people of the demo scenario and their common password. */
export const demoAccounts = {
  password: 'copper and verdigris',
  people: [
    { email: 'ilse@calder-vane.example', name: 'Ilse Aldaran', what: 'partner, licensed engineer' },
    { email: 'tom@calder-vane.example', name: 'Tom Renwick', what: 'consultant, works on KG-02' },
    { email: 'sana@calder-vane.example', name: 'Sana Iwu', what: 'consultant, works on HS-01 only' },
    { email: 'mira@kestrel-gap.example', name: 'Mira Oyelade', what: 'of the client Kestrel Gap Lime & Stone' },
    { email: 'jon@harrow-sound.example', name: 'Jon Tallis', what: 'of the client Harrow Sound Cold Store' },
  ],
} as const;
