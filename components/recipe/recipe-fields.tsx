import { bandOfView } from '@/lib/science/imaging/recipe'
import { FigureField } from './figure-field'
import { CLOSE_FIELD_SCALE, LIMIT_SCALES, WEIGHT_SCALE } from './limit-scales'
import { limitsKeyOf, setLimit, type AnyLimits, type WholeRecipe } from './recipe-draft'

interface Fields {
  recipe: WholeRecipe
  /** Sentences by the path of the field, such as `deep.blackSigma`. */
  errors: Record<string, string>
  onChange: (recipe: WholeRecipe) => void
}

/** Limits of the view that is tuned: only those that it has. */
export function LimitFields({ recipe, errors, onChange, view }: Fields & { view: string }) {
  const key = limitsKeyOf(view)
  const limits: AnyLimits = recipe[key]
  return (
    <div className="flex flex-col gap-2">
      {LIMIT_SCALES.map((scale) => {
        const value = limits[scale.name]
        if (typeof value !== 'number') return null
        return (
          <FigureField
            // Another view's field starts with that view's own number.
            key={`${key} ${scale.name}`}
            label={scale.label}
            hint={scale.hint}
            unit={scale.unit}
            scale={scale}
            value={value}
            error={errors[`${key}.${scale.name}`]}
            onChange={(next) => onChange(setLimit(recipe, key, scale.name, next))}
          />
        )
      })}
      {typeof limits.smooth === 'boolean' ? (
        <label className="flex min-h-8 items-center gap-2.5 text-small">
          <input
            type="checkbox"
            checked={limits.smooth}
            onChange={(event) => onChange(setLimit(recipe, key, 'smooth', event.target.checked))}
            className="size-5 accent-lamp"
          />
          Smooth over 3 by 3 pixels first
        </label>
      ) : null}
      {bandOfView(view) === null ? null : <p className="text-note text-mute">All bands share these.</p>}
    </div>
  )
}

/** Factors on each band's brightness in the views of colour. */
export function WeightFields({ recipe, errors, onChange, bands }: Fields & { bands: string[] }) {
  return (
    <div className="flex flex-col gap-2">
      {bands.map((band) => (
        <FigureField
          key={band}
          label={band}
          unit="×"
          scale={WEIGHT_SCALE}
          value={recipe.weights[band] ?? 1}
          error={errors[`weights.${band}`]}
          onChange={(weight) => onChange({ ...recipe, weights: { ...recipe.weights, [band]: weight } })}
        />
      ))}
    </div>
  )
}

export function FieldOfView({ recipe, errors, onChange }: Fields) {
  return (
    <div className="flex flex-col gap-2">
      <FigureField
        label="Close field"
        hint="Side of the close field; F on the bench changes between it and the whole cutout."
        unit="″"
        scale={CLOSE_FIELD_SCALE}
        value={recipe.closeFieldArcsec}
        error={errors.closeFieldArcsec}
        onChange={(closeFieldArcsec) => onChange({ ...recipe, closeFieldArcsec })}
      />
      <label className="flex min-h-8 items-center gap-2.5 text-small">
        <input
          type="checkbox"
          checked={recipe.northUp}
          onChange={(event) => onChange({ ...recipe, northUp: event.target.checked })}
          className="size-5 accent-lamp"
        />
        North up, east left
      </label>
      <p className="text-note text-mute">
        Turned pictures are resampled; the cutouts themselves and what is measured on them stay as they came.
      </p>
    </div>
  )
}
