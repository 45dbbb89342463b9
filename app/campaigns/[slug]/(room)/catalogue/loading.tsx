import { TableLoading } from '@/components/table/table-loading'

export default function Loading() {
  return <TableLoading label="The catalogue is being read" />
}
