import { S3Error } from './errors.ts';
import { hmac, parseAmzDate, sameSignature, signingKeyFor, type Credentials } from './signature.ts';

/** How many bytes the policy lets the file have. */
export interface SizeRange {
  least: number;
  most: number;
}

interface PolicyOptions {
  credentials: readonly Credentials[];
  region: string;
  now: Date;
  bucketName: string;
}

/** Fields a policy need not mention (S3 API reference, "POST policy"). */
const UNCONDITIONED = new Set(['x-amz-signature', 'file', 'policy', 'signature', 'awsaccesskeyid']);

function denied(detail: string): S3Error {
  return new S3Error('AccessDenied', `Invalid according to Policy: ${detail}`);
}

function checkSignature(fields: ReadonlyMap<string, string>, policy: string, options: PolicyOptions): void {
  if (fields.get('x-amz-algorithm') !== 'AWS4-HMAC-SHA256') throw new S3Error('InvalidArgument', 'X-Amz-Algorithm must be AWS4-HMAC-SHA256');
  const [accessKeyId, day, region, service, end] = (fields.get('x-amz-credential') ?? '').split('/');
  const date = fields.get('x-amz-date') ?? '';
  if (!day || service !== 's3' || end !== 'aws4_request' || region !== options.region || !parseAmzDate(date) || !date.startsWith(day)) {
    throw new S3Error('InvalidArgument', 'X-Amz-Credential must be KEY/DATE/REGION/s3/aws4_request, dated as X-Amz-Date');
  }
  const found = options.credentials.find((one) => one.accessKeyId === accessKeyId);
  if (!found) throw new S3Error('InvalidAccessKeyId');
  const expected = hmac(signingKeyFor(found.secretAccessKey, day, options.region, 's3'), policy).toString('hex');
  if (!sameSignature(fields.get('x-amz-signature') ?? '', expected)) throw new S3Error('SignatureDoesNotMatch');
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

function parse(policy: string): { expiration: Date; conditions: unknown[] } {
  let json: unknown;
  try {
    json = JSON.parse(Buffer.from(policy, 'base64').toString('utf8'));
  } catch {
    throw new S3Error('InvalidPolicyDocument', 'Invalid Policy: Invalid JSON.');
  }
  const expiration = isRecord(json) && typeof json['expiration'] === 'string' ? new Date(json['expiration']) : null;
  if (!expiration || Number.isNaN(expiration.getTime())) throw new S3Error('InvalidPolicyDocument', 'Invalid Policy: Policy missing expiration.');
  const conditions = isRecord(json) ? json['conditions'] : null;
  if (!Array.isArray(conditions)) throw new S3Error('InvalidPolicyDocument', 'Invalid Policy: Policy missing conditions.');
  return { expiration, conditions };
}

/** One condition in its three-part form; the object form is `eq`. */
function threeParts(condition: unknown): [string, unknown, unknown][] {
  if (Array.isArray(condition) && condition.length === 3) return [[String(condition[0]).toLowerCase(), condition[1], condition[2]]];
  if (isRecord(condition)) return Object.entries(condition).map(([name, value]) => ['eq', `$${name}`, value]);
  throw new S3Error('InvalidPolicyDocument', 'Invalid Policy: a condition is not well formed.');
}

function holds(operator: string, name: string, actual: string, wanted: string): boolean {
  if (operator === 'eq') return actual === wanted;
  // Several content types in one field must each begin so.
  if (name === 'content-type') return actual.split(',').every((one) => one.trim().startsWith(wanted));
  return actual.startsWith(wanted);
}

/**
 * Checks the signature over the policy, its expiry, every condition, and that no field came which the policy does not
 * mention. Returns the size the file may have. `fields` holds the key with `${filename}` already put in.
 */
export function enforcePolicy(fields: ReadonlyMap<string, string>, options: PolicyOptions): SizeRange {
  const policy = fields.get('policy');
  if (policy === undefined) throw new S3Error('AccessDenied');
  checkSignature(fields, policy, options);
  const { expiration, conditions } = parse(policy);
  if (expiration.getTime() <= options.now.getTime()) throw denied('Policy expired.');
  const size: SizeRange = { least: 0, most: 5 * 1024 ** 3 };
  const mentioned = new Set<string>();
  for (const [operator, subject, wanted] of conditions.flatMap(threeParts)) {
    if (operator === 'content-length-range') {
      size.least = Math.max(size.least, Number(subject));
      size.most = Math.min(size.most, Number(wanted));
      if (Number.isNaN(size.least) || Number.isNaN(size.most)) throw new S3Error('InvalidPolicyDocument', 'Invalid Policy: content-length-range takes numbers.');
      continue;
    }
    if ((operator !== 'eq' && operator !== 'starts-with') || typeof subject !== 'string' || !subject.startsWith('$') || typeof wanted !== 'string') {
      throw new S3Error('InvalidPolicyDocument', `Invalid Policy: unknown condition ${JSON.stringify([operator, subject, wanted])}`);
    }
    const name = subject.slice(1).toLowerCase();
    mentioned.add(name);
    const actual = name === 'bucket' ? options.bucketName : fields.get(name);
    if (actual === undefined || !holds(operator, name, actual, wanted)) {
      throw denied(`Policy Condition failed: ${JSON.stringify([operator, subject, wanted])}`);
    }
  }
  const extra = [...fields.keys()].filter((name) => !mentioned.has(name) && !UNCONDITIONED.has(name) && !name.startsWith('x-ignore-'));
  if (extra.length > 0) throw denied(`Extra input fields: ${extra.join(', ')}`);
  return size;
}
