/** Styles have no meaning in jsdom. */
export default {};
