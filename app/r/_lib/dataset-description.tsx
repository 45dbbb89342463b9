import type { ReleaseContents, ReleaseHead } from '@/lib/work/releases/read-release-page'
import type { ReleaseSky } from '@/lib/work/releases/release-sky'

/**
 * What machines read of a release's page: a schema.org Dataset as JSON-LD, and links to what belongs to it by their registered relations
 * (RFC 8574 cite-as, RFC 8631 service-desc, RFC 4946 license, POWDER describedby).
 */
export function DatasetDescription({
  head,
  contents,
  sky,
  addresses,
  fileAt,
}: {
  head: ReleaseHead
  contents: ReleaseContents
  sky: ReleaseSky
  addresses: { release: string; cone: string; capabilities: string }
  fileAt: (name: string) => string
}) {
  const hasFile = (name: string) => contents.files.some((file) => file.name === name)
  return (
    <>
      <link rel="cite-as" href={addresses.release} />
      <link rel="service-desc" type="text/xml" href={addresses.capabilities} />
      {head.licence.url ? <link rel="license" href={head.licence.url} /> : null}
      {hasFile('datacite.json') ? (
        <link rel="describedby" type="application/json" href={fileAt('datacite.json')} />
      ) : null}
      <script
        type="application/ld+json"
        dangerouslySetInnerHTML={{ __html: asScript(dataset(head, contents, sky, addresses, fileAt)) }}
      />
    </>
  )
}

/** Nothing in it can end the element that holds it. */
const asScript = (value: unknown): string => JSON.stringify(value).replace(/</g, '\\u003c')

function dataset(
  head: ReleaseHead,
  { files }: ReleaseContents,
  sky: ReleaseSky,
  addresses: { release: string; cone: string },
  fileAt: (name: string) => string,
) {
  const person = (name: string) =>
    /^[^,]+,[^,]+$/.test(name) ? { '@type': 'Person', name } : { '@type': 'Organization', name }
  return {
    '@context': 'https://schema.org',
    '@type': 'Dataset',
    '@id': addresses.release,
    name: head.title,
    description: `${head.description}\n\n${head.cautions.join(' ')}`,
    url: addresses.release,
    version: String(head.number),
    datePublished: head.frozenAt.slice(0, 10),
    creator: head.authors.map(person),
    publisher: { '@type': 'Organization', name: head.publisher },
    license: head.licence.url ?? head.licence.name,
    creditText: head.howToCite,
    creativeWorkStatus: head.notices.some(({ kind }) => kind === 'retraction') ? 'Withdrawn' : 'Published',
    keywords: ['strong gravitational lensing', 'sky survey', head.survey],
    isAccessibleForFree: head.access === 'public',
    measurementTechnique: 'Visual grading of images by several people; not a spectroscopic confirmation',
    size: `${head.entries} entries`,
    ...(sky.extent
      ? {
          spatialCoverage: {
            '@type': 'Place',
            description:
              `Sky, ICRS: within ${sky.extent.radiusDeg.toFixed(4)} deg of right ascension ` +
              `${sky.extent.centre.raDeg.toFixed(5)} deg, declination ${sky.extent.centre.decDeg.toFixed(5)} deg`,
          },
        }
      : {}),
    distribution: [
      ...files.map(({ name, mediaType, bytes, sha256, about }) => ({
        '@type': 'DataDownload',
        name,
        description: about,
        encodingFormat: mediaType,
        contentUrl: fileAt(name),
        contentSize: `${bytes} B`,
        sha256,
      })),
      {
        '@type': 'DataDownload',
        name: 'Simple Cone Search 1.03',
        encodingFormat: 'text/xml',
        contentUrl: addresses.cone,
        conformsTo: 'ivo://ivoa.net/std/ConeSearch',
      },
    ],
  }
}
