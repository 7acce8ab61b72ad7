export { AddMaterial } from './components/add-material'
export { MaterialById } from './components/material-page'
export { MaterialsList } from './components/materials-list'
