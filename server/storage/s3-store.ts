/** Files in an S3-compatible bucket. Credentials come from the environment in the way the AWS packages read it. */
import { DeleteObjectCommand, GetObjectCommand, NoSuchKey, PutObjectCommand, S3Client } from '@aws-sdk/client-s3';
import type { ByteStore } from './file-store.ts';

export function createS3Store(options: { bucket: string; region: string; endpoint?: string }): ByteStore {
  const client = new S3Client({
    region: options.region,
    ...(options.endpoint ? { endpoint: options.endpoint, forcePathStyle: true } : {}),
    // Other makers' stores do not know the newer checksums.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
  });
  const Bucket = options.bucket;
  return {
    async write(key, bytes, mediaType) {
      await client.send(new PutObjectCommand({ Bucket, Key: key, Body: bytes, ContentType: mediaType }));
    },
    async read(key) {
      try {
        const answer = await client.send(new GetObjectCommand({ Bucket, Key: key }));
        return (await answer.Body?.transformToByteArray()) ?? null;
      } catch (error) {
        if (error instanceof NoSuchKey) return null;
        throw error;
      }
    },
    async erase(key) {
      await client.send(new DeleteObjectCommand({ Bucket, Key: key }));
    },
  };
}
