export { directness, explainMatch, suggestion, type SearchTexts } from './match'
export { searchRevisions } from './repository'
export { fold, searchTokens, TRADE_WORDS, wordsOf } from './words'
