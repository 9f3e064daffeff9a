declare module 's3rver' {
  interface S3rverOptions {
    address?: string;
    port?: number;
    directory: string;
    silent?: boolean;
    allowMismatchedSignatures?: boolean;
    resetOnClose?: boolean;
  }
  /** The parts of s3rver 3.7 that we use; the package ships no types. */
  export default class S3rver {
    constructor(options: S3rverOptions);
    run(): Promise<{ address: string; port: number }>;
    close(): Promise<void>;
  }
}
