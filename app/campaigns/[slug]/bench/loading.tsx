import { BenchShape } from '@/components/bench/bench-shape'

export default function LoadingBench() {
  return <BenchShape />
}
