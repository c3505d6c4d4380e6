import { element } from './xml.ts';

/** Status and default sentence of each error code, from the S3 API reference, "Error responses". */
const codes = {
  AccessForbidden: [403, 'CORSResponse: This CORS request is not allowed.'],
  AccessDenied: [403, 'Access Denied'],
  AuthorizationHeaderMalformed: [400, 'The authorization header that you provided is not valid.'],
  AuthorizationQueryParametersError: [400, 'The authorization query parameters that you provided are not valid.'],
  BadDigest: [400, 'The Content-MD5 or checksum value that you specified did not match what the server received.'],
  BucketAlreadyOwnedByYou: [409, 'The bucket that you tried to create already exists, and you own it.'],
  BucketNotEmpty: [409, 'The bucket that you tried to delete is not empty.'],
  EntityTooLarge: [400, 'Your proposed upload exceeds the maximum allowed object size.'],
  EntityTooSmall: [400, 'Your proposed upload is smaller than the minimum allowed object size.'],
  IncompleteBody: [400, 'You did not provide the number of bytes specified by the Content-Length HTTP header.'],
  InternalError: [500, 'An internal error occurred. Try again.'],
  InvalidAccessKeyId: [403, 'The AWS access key ID that you provided does not exist in our records.'],
  InvalidArgument: [400, 'Invalid Argument'],
  InvalidBucketName: [400, 'The specified bucket is not valid.'],
  InvalidDigest: [400, 'The Content-MD5 or checksum value that you specified is not valid.'],
  InvalidPart: [400, 'One or more of the specified parts could not be found, or its entity tag did not match.'],
  InvalidPartOrder: [400, 'The list of parts was not in ascending order.'],
  InvalidPolicyDocument: [400, 'The content of the form does not meet the conditions specified in the policy document.'],
  InvalidRange: [416, 'The requested range is not satisfiable.'],
  InvalidRequest: [400, 'Invalid Request'],
  InvalidURI: [400, "The specified URI couldn't be parsed."],
  KeyTooLongError: [400, 'Your key is too long.'],
  MalformedPOSTRequest: [400, 'The body of your POST request is not well-formed multipart/form-data.'],
  MalformedXML: [400, 'The XML that you provided was not well formed or did not validate against our published schema.'],
  MethodNotAllowed: [405, 'The specified method is not allowed against this resource.'],
  MissingContentLength: [411, 'You must provide the Content-Length HTTP header.'],
  NoSuchBucket: [404, 'The specified bucket does not exist.'],
  NoSuchKey: [404, 'The specified key does not exist.'],
  NoSuchUpload: [404, 'The specified multipart upload does not exist.'],
  NotImplemented: [501, 'A header or query parameter that you provided implies functionality that is not implemented.'],
  NotModified: [304, 'Not Modified'],
  PreconditionFailed: [412, 'At least one of the preconditions that you specified did not hold.'],
  RequestTimeTooSkewed: [403, 'The difference between the request time and the server’s time is too large.'],
  SignatureDoesNotMatch: [403, 'The request signature that the server calculated does not match the signature that you provided.'],
  XAmzContentSHA256Mismatch: [400, 'The provided x-amz-content-sha256 header does not match what was computed.'],
} as const;

export type S3ErrorCode = keyof typeof codes;

/** An error a client is meant to see: its code decides the HTTP status. */
export class S3Error extends Error {
  readonly code: S3ErrorCode;
  readonly status: number;

  /** Elements beside code and message: a client told the right `Region` signs again for it. */
  readonly more: Readonly<Record<string, string>>;

  constructor(code: S3ErrorCode, message: string = codes[code][1], more: Readonly<Record<string, string>> = {}) {
    super(message);
    this.more = more;
    this.code = code;
    this.status = codes[code][0];
  }

  toXml(resource: string, requestId: string): string {
    return element('Error', [
      element('Code', this.code),
      element('Message', this.message),
      ...Object.entries(this.more).map(([name, value]) => element(name, value)),
      element('Resource', resource),
      element('RequestId', requestId),
    ]);
  }
}
