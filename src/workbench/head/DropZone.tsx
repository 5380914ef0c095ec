import { useEffect, useState } from 'react'
import { useWorkbench } from '../use'
import { openPicked } from './open-file'

/** Takes a file that is dropped anywhere on the page. */
export function DropZone() {
  const workbench = useWorkbench()
  const [over, setOver] = useState(false)
  useEffect(() => {
    // Enter and leave come for every element on the way: only their balance says whether a file is over the page.
    let depth = 0
    const carriesFile = (event: DragEvent) => event.dataTransfer?.types.includes('Files') ?? false
    const onEnter = (event: DragEvent) => {
      if (!carriesFile(event)) return
      depth += 1
      setOver(true)
    }
    const onLeave = (event: DragEvent) => {
      if (!carriesFile(event)) return
      depth = Math.max(0, depth - 1)
      if (depth === 0) setOver(false)
    }
    const onOver = (event: DragEvent) => {
      if (carriesFile(event)) event.preventDefault()
    }
    const onDrop = (event: DragEvent) => {
      const [file] = event.dataTransfer?.files ?? []
      depth = 0
      setOver(false)
      if (!file) return
      event.preventDefault()
      event.stopPropagation()
      void openPicked(workbench, file)
    }
    // In the capturing phase: the editor has ideas of its own about dropped files.
    const options = { capture: true }
    window.addEventListener('dragenter', onEnter, options)
    window.addEventListener('dragleave', onLeave, options)
    window.addEventListener('dragover', onOver, options)
    window.addEventListener('drop', onDrop, options)
    return () => {
      window.removeEventListener('dragenter', onEnter, options)
      window.removeEventListener('dragleave', onLeave, options)
      window.removeEventListener('dragover', onOver, options)
      window.removeEventListener('drop', onDrop, options)
    }
  }, [workbench])
  return over ? (
    <div className="drop" aria-hidden="true">
      <p>Drop a draft to open it</p>
    </div>
  ) : null
}
