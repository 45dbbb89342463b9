import { BenchShape } from '@/components/bench/bench-shape'

export default function LoadingPractice() {
  return <BenchShape />
}
