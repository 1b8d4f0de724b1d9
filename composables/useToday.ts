/** The moment in which the page was made: the same on the server and in the browser, so that "overdue" cannot differ between them. */
export const useToday = () => useState('today', () => new Date().toISOString())
