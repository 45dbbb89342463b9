import { ArrowDown, ArrowUp } from 'lucide-react'
import { moveView, possibleViews, toggleView, type WholeRecipe } from './recipe-draft'

/** The views in the order in which they are shown; the chosen one is tuned below and tried at the side. */
export function ViewList({
  recipe,
  bands,
  chosen,
  onChoose,
  onChange,
}: {
  recipe: WholeRecipe
  bands: string[]
  chosen: string
  onChoose: (key: string) => void
  onChange: (recipe: WholeRecipe) => void
}) {
  const arrow = 'grid size-7 place-items-center rounded-key text-mute hover:text-text disabled:invisible'
  return (
    <ol aria-label="Views in their order" className="flex flex-col">
      {possibleViews(recipe, bands).map(({ key, label, shown }) => {
        const place = recipe.views.indexOf(key)
        return (
          <li key={key} className="flex items-center gap-2 border-b border-line/60 last:border-b-0">
            <input
              type="checkbox"
              aria-label={`Show ${label}`}
              checked={shown}
              disabled={shown && recipe.views.length === 1}
              onChange={() => onChange(toggleView(recipe, key))}
              className="size-5 accent-lamp"
            />
            <button
              type="button"
              aria-pressed={key === chosen}
              onClick={() => onChoose(key)}
              className={`flex min-h-8 min-w-0 flex-1 items-center gap-2 rounded-key px-2 text-left text-small aria-pressed:bg-raise aria-pressed:font-semibold ${shown ? '' : 'text-mute'}`}
            >
              <span className="figures w-4 text-note text-mute">{shown ? place + 1 : ''}</span>
              <span className="truncate">{label}</span>
              {shown ? null : <span className="text-note">not shown</span>}
            </button>
            <button
              type="button"
              aria-label={`Move ${label} up`}
              disabled={place <= 0}
              onClick={() => onChange(moveView(recipe, key, -1))}
              className={arrow}
            >
              <ArrowUp size={14} aria-hidden="true" />
            </button>
            <button
              type="button"
              aria-label={`Move ${label} down`}
              disabled={place < 0 || place === recipe.views.length - 1}
              onClick={() => onChange(moveView(recipe, key, 1))}
              className={arrow}
            >
              <ArrowDown size={14} aria-hidden="true" />
            </button>
          </li>
        )
      })}
    </ol>
  )
}
