/** An answer in the S3 error form. `code` is one of the codes of the S3 API reference. */
export class S3Error extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    message: string,
    readonly headers: Record<string, string> = {},
  ) {
    super(message)
    this.name = 'S3Error'
  }
}

export const noSuchKey = () => new S3Error(404, 'NoSuchKey', 'The specified key does not exist.')
export const noSuchBucket = () => new S3Error(404, 'NoSuchBucket', 'The specified bucket does not exist.')
export const noSuchUpload = () => new S3Error(404, 'NoSuchUpload', 'The specified upload does not exist. It may have been completed, aborted or expired.')
export const preconditionFailed = () => new S3Error(412, 'PreconditionFailed', 'At least one of the preconditions you specified did not hold.')
export const invalidArgument = (message: string) => new S3Error(400, 'InvalidArgument', message)
export const invalidRequest = (message: string) => new S3Error(400, 'InvalidRequest', message)
export const malformedXml = () => new S3Error(400, 'MalformedXML', 'The XML you provided was not well-formed or did not validate.')
export const incompleteBody = () => new S3Error(400, 'IncompleteBody', 'The request body ended before the number of bytes that was announced.')
export const notImplemented = (what: string) => new S3Error(501, 'NotImplemented', `This storage does not support ${what}.`)
export const signatureMismatch = () => new S3Error(403, 'SignatureDoesNotMatch', 'The request signature we calculated does not match the signature you provided.')
export const accessDenied = (message = 'Access Denied') => new S3Error(403, 'AccessDenied', message)
