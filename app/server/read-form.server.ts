import { data } from 'react-router'

const refuse = (status: 400 | 415, message: string) => data({ message }, { status })

/**
 * The form of a page's action. What no form of ours sends is refused with a page that says so, before the action looks at it.
 * @throws the answer: 415 for another media type, 400 for a form that cannot be read
 */
export async function readForm(request: Request): Promise<FormData> {
  const type = request.headers.get('Content-Type')?.split(';')[0]!.trim().toLowerCase() ?? ''
  if (type !== 'application/x-www-form-urlencoded' && type !== 'multipart/form-data')
    throw refuse(415, 'This address takes a form, as the page sends it. Open the page and send it from there.')
  try {
    return await request.formData()
  } catch {
    throw refuse(400, 'The form did not come whole. Open the page and send it again.')
  }
}
