import Link from 'next/link'
import type { DeliveredFile } from '@/lib/work/intake/delivered-file'
import { FateMark } from './fate-mark'
import { fileSize } from './file-size'

const CELL = 'px-2 py-1.5 align-top'
const WIDE = 'hidden md:table-cell'

/** Every file of a page with its fate. On a phone what happened stands below the name. */
export function FileTable({ files, campaignPath }: { files: DeliveredFile[]; campaignPath: string }) {
  return (
    <table className="w-full border-collapse text-small">
      <thead className="sticky top-0 z-10 bg-page text-left text-note text-mute">
        <tr className="border-b border-line">
          <th scope="col" className={`${CELL} font-normal`}>
            File
          </th>
          <th scope="col" className={`${CELL} w-28 font-normal`}>
            Fate
          </th>
          <th scope="col" className={`${CELL} ${WIDE} font-normal`}>
            What happened
          </th>
          <th scope="col" className={`${CELL} ${WIDE} font-normal`}>
            Candidate
          </th>
          <th scope="col" className={`${CELL} ${WIDE} w-20 font-normal`}>
            Band
          </th>
          <th scope="col" className={`${CELL} ${WIDE} w-24 text-right font-normal`}>
            Size
          </th>
        </tr>
      </thead>
      <tbody>
        {files.map((file) => (
          <FileRow key={file.id} file={file} campaignPath={campaignPath} />
        ))}
      </tbody>
    </table>
  )
}

function FileRow({ file, campaignPath }: { file: DeliveredFile; campaignPath: string }) {
  const reason = file.reason ?? ''
  return (
    <tr className={`h-row border-b border-line ${file.replaced ? 'text-mute' : ''}`}>
      <th scope="row" className={`${CELL} max-w-0 font-normal md:max-w-72`}>
        <span className="figures block break-all text-left md:truncate" title={file.name}>
          {file.name}
        </span>
        <span className="mt-0.5 block text-left text-note text-mute md:hidden">
          {[reason, file.candidate ? `${file.candidate}${file.bands.length ? ` in ${file.bands.join(', ')}` : ''}` : '']
            .filter(Boolean)
            .join(' · ')}
        </span>
      </th>
      <td className={CELL}>
        <FateMark fate={file.fate} />
      </td>
      <td className={`${CELL} ${WIDE} text-mute`}>{reason}</td>
      <td className={`${CELL} ${WIDE}`}>
        <CandidateName file={file} campaignPath={campaignPath} />
      </td>
      <td className={`${CELL} ${WIDE} figures`}>{file.bands.join(' ')}</td>
      <td className={`${CELL} ${WIDE} figures whitespace-nowrap text-right text-mute`}>{fileSize(file.bytes)}</td>
    </tr>
  )
}

function CandidateName({ file, campaignPath }: { file: DeliveredFile; campaignPath: string }) {
  if (file.candidate === null) return null
  const name = <span className="figures whitespace-nowrap">{file.candidate}</span>
  if (file.candidateId === null) return <span className="text-mute">{name}</span>
  return (
    <Link
      href={`${campaignPath}/candidates/${file.candidateId}`}
      className="underline decoration-line underline-offset-4 hover:decoration-text"
    >
      {name}
    </Link>
  )
}
