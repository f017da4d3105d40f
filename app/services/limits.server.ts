/** Every limit on how much and how often, in one table. Start values; `REQUESTS_PER_MINUTE` scales the first row. */
export const limits = {
  /** Requests per minute: a visitor's from one address, a session's, and all from one address. */
  requests: { visitor: 1, session: 2, address: 10 },
  /** Bytes of a request body. */
  body: { usual: 1_048_576, upload: 26_214_400 },
  /** Requests for a code: [count, seconds]. */
  askCode: { address: [5, 3600], client: [10, 600], everybody: [200, 3600] },
  /** Codes tried; per challenge the row of the challenge counts. */
  checkCode: { challenge: 5, address: [15, 3600], client: [30, 600] },
  /** Measurement files of one person. */
  upload: [120, 3600],
  /** Share links opened: from one address, and with a token that is none. */
  shareLink: { client: [60, 60], unknown: [20, 60] },
} as const;
