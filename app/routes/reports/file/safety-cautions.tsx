import { TextLink } from '~/components/text-link'
import { Warning } from '~/components/warning'

/** Stands where the work begins. Promises nothing, and defers to those who know the place and the machine. */
export function SafetyCautions() {
  return (
    <div className="mb-6 max-w-[640px]">
      <Warning severity="caution" heading="Before you open a console again">
        <p>
          Unplug it and take the battery out. A power supply can hold a dangerous charge long after; leave it closed. Irons and
          hot air burn, flux fumes and leaded solder harm: air the room, wash your hands. Lithium cells must not be heated, bent
          or pierced.
        </p>
        <p>
          Local electrical rules and the maker’s service information come first. Where you are not sure, ask a qualified person.{' '}
          <TextLink href="/guides/safety">More on safety</TextLink>
        </p>
      </Warning>
    </div>
  )
}
