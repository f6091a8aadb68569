import { Form, useNavigation } from 'react-router'
import { Actions, Button } from '~/components/button'
import { ErrorSummary } from '~/components/error-summary'
import { SelectField, TextArea, TextField } from '~/components/field'
import type { FieldError } from '~/lib/domain-error'
import type { FormValues } from '~/lib/parse-form'

export type BoardFormProps = {
  values: FormValues
  errors: FieldError[]
  consoles: { id: string; name: string }[]
  /** Only when a board is opened: its address is chosen once. */
  hasAddress?: boolean
  /** Why the console cannot be changed any more. */
  consoleFixed?: string
  licences: readonly string[]
  /** What the button says, and what the error summary says is held up. */
  action: string
  before: string
}

const labels = {
  name: 'Name',
  slug: 'Address',
  summary: 'Summary',
  replaces: 'What it replaces',
  console: 'Console',
  licence: 'Licence',
  description: 'Description'
}

/** The form of a board, when it is opened and when it is edited. */
export function BoardForm({ values, errors, consoles, hasAddress, consoleFixed, licences, action, before }: BoardFormProps) {
  const error = (path: string) => errors.find((e) => e.path === path)?.message
  const isBusy = useNavigation().state === 'submitting'
  return (
    <Form method="post" noValidate>
      <ErrorSummary errors={errors} before={before} labels={labels} />
      <TextField
        name="name"
        label={labels.name}
        hint="One or two words, as it is printed on the board."
        defaultValue={values.name}
        maxLength={60}
        error={error('name')}
        required
      />
      {hasAddress && (
        <TextField
          name="slug"
          label={labels.slug}
          hint="Stays for good: /boards/… Left empty it is made from the name."
          defaultValue={values.slug}
          maxLength={40}
          autoCapitalize="none"
          spellCheck={false}
          error={error('slug')}
          isOptional
        />
      )}
      <TextField
        name="summary"
        label={labels.summary}
        hint="One plain sentence: what it does for the console."
        defaultValue={values.summary}
        maxLength={160}
        error={error('summary')}
        isLong
        required
      />
      <TextField
        name="replaces"
        label={labels.replaces}
        hint="The ageing part, and where it sits."
        defaultValue={values.replaces}
        maxLength={240}
        error={error('replaces')}
        isLong
        required
      />
      {consoleFixed ? (
        <>
          <input type="hidden" name="console" value={values.console} />
          <TextField
            name="console-name"
            label={labels.console}
            hint={consoleFixed}
            value={consoles.find((c) => c.id === values.console)?.name ?? ''}
            error={error('console')}
            disabled
            readOnly
          />
        </>
      ) : (
        <SelectField
          name="console"
          label={labels.console}
          hint="Fixed once a release is published."
          empty="Choose one"
          options={consoles.map((c) => ({ value: c.id, label: c.name }))}
          defaultValue={values.console ?? ''}
          error={error('console')}
          required
        />
      )}
      <TextField
        name="licence"
        label={labels.licence}
        hint="The identifier on the SPDX licence list."
        defaultValue={values.licence}
        list="licences"
        autoCapitalize="none"
        spellCheck={false}
        error={error('licence')}
        required
      />
      <datalist id="licences">
        {licences.map((id) => (
          <option key={id} value={id} />
        ))}
      </datalist>
      <TextArea
        name="description"
        label={labels.description}
        hint="Markdown: how it works, what to know before ordering one. Links to https and mailto."
        defaultValue={values.description}
        rows={10}
        error={error('description')}
        isLong
        isOptional
      />
      <Actions>
        <Button busy={isBusy ? 'Saving' : undefined}>{action}</Button>
      </Actions>
    </Form>
  )
}
