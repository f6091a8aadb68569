export default function Home() {
  return <h1>Fettle</h1>
}
