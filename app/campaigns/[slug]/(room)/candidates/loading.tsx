import { TableLoading } from '@/components/table/table-loading'

export default function Loading() {
  return <TableLoading label="The candidates are being read" />
}
