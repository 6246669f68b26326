/** Where uploaded and made files live. Keys are made by the server; a client's file name is only ever shown. */
export interface FileStore {
  put(bytes: Uint8Array, mediaType: string): Promise<string>;
  /** Throws AppError 404 `file-missing` where nothing is stored under the key. */
  get(key: string): Promise<Uint8Array>;
  remove(key: string): Promise<void>;
}
