/** The invented people of the demo scenario and their common password. */
export const demoAccounts = {
  password: 'copper and verdigris',
  people: [
    { email: 'ilse@calder-vane.example', what: 'Ilse Aldaran, partner, licensed engineer' },
    { email: 'tom@calder-vane.example', what: 'Tom Renwick, consultant, works on KG-02' },
    { email: 'sana@calder-vane.example', what: 'Sana Iwu, consultant, works on HS-01 only' },
    { email: 'mira@kestrel-gap.example', what: 'Mira Oyelade, plant manager of the client Kestrel Gap Lime & Stone' },
    { email: 'jon@harrow-sound.example', what: 'Jon Tallis, of the client Harrow Sound Cold Store' },
  ],
} as const;
