/** First part of every address of the API. */
export const apiPrefix = 'api/v1';
