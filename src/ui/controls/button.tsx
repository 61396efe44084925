import type { ButtonHTMLAttributes } from 'react'

interface ButtonProps extends ButtonHTMLAttributes<HTMLButtonElement> {
  readonly look?: 'plain' | 'quiet' | 'primary'
}

/** A button at least 24 px high; `quiet` shows its edge only on hover. */
export function Button({ look = 'plain', className = '', type = 'button', ...rest }: ButtonProps) {
  return <button type={type} className={`button ${look === 'plain' ? '' : look} ${className}`} {...rest} />
}
