import { z } from 'zod'

const email = z.string().trim().toLowerCase().max(254, 'That address is too long').pipe(z.email('Enter an e-mail address such as name@example.org'))

export const signInSchema = z.object({
  email,
  password: z.string().min(1, 'Enter your password').max(200, 'That password is too long'),
})

export const signUpSchema = z.object({
  name: z.string().trim().min(1, 'Enter the name others will see').max(80, 'Keep the name under 80 characters'),
  email,
  /** Length is what counts (NIST SP 800-63B: at least 8, no composition rules); we ask for 10. */
  password: z.string().min(10, 'Use at least 10 characters').max(200, 'Use at most 200 characters'),
})

export type SignIn = z.infer<typeof signInSchema>
export type SignUp = z.infer<typeof signUpSchema>
