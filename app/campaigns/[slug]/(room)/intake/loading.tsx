import { TableLoading } from '@/components/table/table-loading'

export default function Loading() {
  return <TableLoading label="Loading the files" />
}
