/** How to sign in to the demonstration: an invented firm, its people and its clients, under domains that nobody can own (RFC 2606). */
export const DEMONSTRATION_PASSWORD = 'pole-and-zero-2026'

export const DEMONSTRATION_EMAILS = [
  'ines.varga@haldenvoss.example',
  'tomas.reyl@haldenvoss.example',
  'marta.lindqvist@haldenvoss.example',
  'piet.aalders@haldenvoss.example',
  'ruth.osei@haldenvoss.example',
  'nadia.berg@norrsund-ferries.example',
  'owen.pryce@calder-water.example',
]
