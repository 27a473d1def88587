import { cleanup, fireEvent, render, screen } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { Menu } from './menu.tsx';

afterEach(cleanup);

const show = () =>
  render(
    <Menu label="SCREEPATH" buttonClassName="">
      {(close) => (
        <button type="button" onClick={close}>
          REEDGRIP
        </button>
      )}
    </Menu>,
  );

describe('Menu', () => {
  it('opens and closes by its button and says which', () => {
    show();
    const button = screen.getByRole('button', { name: /SCREEPATH/ });
    expect(button.getAttribute('aria-expanded')).toBe('false');
    fireEvent.click(button);
    expect(button.getAttribute('aria-expanded')).toBe('true');
    expect(screen.getByRole('button', { name: 'REEDGRIP' })).toBeTruthy();
  });

  it('closes by Escape and by a press elsewhere', () => {
    show();
    const button = screen.getByRole('button', { name: /SCREEPATH/ });
    fireEvent.click(button);
    fireEvent.keyDown(screen.getByRole('button', { name: 'REEDGRIP' }), { key: 'Escape' });
    expect(button.getAttribute('aria-expanded')).toBe('false');
    fireEvent.click(button);
    fireEvent.pointerDown(document.body);
    expect(button.getAttribute('aria-expanded')).toBe('false');
  });
});
