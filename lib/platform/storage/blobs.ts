import { config } from '../config/config'
import { BlobStore } from './blob-store'

let store: BlobStore | undefined

/** The blob store of this process, below the data folder. */
export function blobs(): BlobStore {
  store ??= new BlobStore(config().blobFolder, config().temporaryFolder)
  return store
}
