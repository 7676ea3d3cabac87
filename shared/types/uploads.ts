/** POST /api/sessions/:session/clips: an upload begun or found again, or a likely double to be told apart first. */
export type UploadBegun
  = | { kind: 'upload', clipId: string, partSizeBytes: number, partCount: number, uploaded: UploadedPartView[] }
    /** A finished clip has the same size and samples: ask again with the content hash. */
    | { kind: 'hash-first', partSizeBytes: number, partCount: number, candidate: ClipReference }

export interface UploadedPartView { partNumber: number, etag: string, sizeBytes: number }

/** Where a clip can be found; also the `data` of a conflict with a clip that has the same content. */
export interface ClipReference { clipId: string, sessionId: string, name: string }

/** POST /api/clips/:clip/upload/parts */
export interface PartAddresses { parts: { partNumber: number, url: string }[] }
