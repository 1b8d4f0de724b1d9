export const ROOT: string
export const DATA: string
export const TEST_DATA: string
export class Refusal extends Error {}
